import { randomBytes } from "node:crypto";
import type { Actor } from "@/lib/people/actor";
import { type Definition, parseDefinition } from "@/lib/protocol/schema";
import { type Draft, readDraft } from "@/lib/protocols/draft";
import { estimateProtocol } from "@/lib/protocols/estimate";
import { getProtocol, getVersion } from "@/lib/protocols/read";
import type { EstimateAnswer } from "@/lib/protocols/schema";

const makeId = () => randomBytes(5).toString("hex");

export type BegunDraft = { protocolId: string | null; draft: Draft; draftSavedAt: string | null; version: number };

/** The estimate that the editor begins with, and the definition it is of; undefined while the draft has mistakes. */
export async function estimateOfDraft({ by, now, draft }: { by: Actor; now: Date; draft: Draft }): Promise<{ definition: Definition; estimate: EstimateAnswer } | undefined> {
  const parsed = parseDefinition(draft, makeId);
  return parsed.ok ? { definition: parsed.definition, estimate: await estimateProtocol({ by, now, definition: parsed.definition }) } : undefined;
}

/** What the editor goes on from: the stored draft, else the newest version. */
export async function begunFrom(protocolId: string): Promise<BegunDraft & { name: string; isRetired: boolean }> {
  const { name, draft, draftSavedAt, versions, retiredAt } = await getProtocol(protocolId);
  const newest = versions.at(0);
  const stored = draft ?? (newest && (await getVersion({ protocolId, versionId: newest.id })).definition) ?? {};
  return { protocolId, name, isRetired: retiredAt !== null, draft: readDraft({ ...stored, ...(draft ? {} : { name }) }, makeId), draftSavedAt, version: newest?.version ?? 0 };
}

/** A protocol that is not stored before something in it is changed. */
export const begunNew = (given: Readonly<Record<string, unknown>>): BegunDraft => ({ protocolId: null, draft: readDraft(given, makeId), draftSavedAt: null, version: 0 });
