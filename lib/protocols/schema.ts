import { z } from "zod";
import { stripSegment } from "@/lib/campaigns/strip-schema";
import { idSchema } from "@/lib/http/ids";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { type Definition, definitionSchema } from "@/lib/protocol/schema";
import { instant, time, words } from "@/lib/schema";

/** A draft may be half-written: it is kept as it is, and judged when it becomes a version. */
const MAX_DRAFT_LENGTH = 2_000_000;
/** A protocol nests 8 deep; whatever is far beyond that would exhaust the stack of whoever reads it. */
const MAX_DRAFT_DEPTH = 100;
const draft = z.record(z.string(), z.unknown()).refine((value) => !isDeeper(value, MAX_DRAFT_DEPTH), { error: `is nested more than ${MAX_DRAFT_DEPTH} deep`, abort: true }).refine((value) => JSON.stringify(value).length <= MAX_DRAFT_LENGTH, {
  error: `is longer than ${MAX_DRAFT_LENGTH} characters as JSON`,
});

function isDeeper(value: unknown, most: number): boolean {
  let level = [value];
  for (let depth = 0; depth <= most; depth++) {
    level = level.flatMap((one) => (typeof one === "object" && one !== null ? Object.values(one) : []));
    if (level.length === 0) return false;
  }
  return true;
}

export const protocolBody = z.strictObject({ definition: definitionSchema });

export const draftBody = z.strictObject({ draft });

export const versionBody = z.strictObject({
  definition: definitionSchema,
  note: words(2000).optional().describe("What changed, and why"),
  basedOn: z.int().min(0).optional().describe("Number of the version it was written from; 409 when there is a newer one"),
});

export const protocolChange = z.strictObject({
  name: words(200).optional(),
  draft: draft.nullable().optional().describe("Of the next version; null throws it away"),
  draftBasedOn: instant.nullable().optional().describe("`draftSavedAt` as it was read; 409 when somebody has saved since"),
});

export const estimateBody = z.strictObject({ definition: definitionSchema, rigId: idSchema.optional(), sensorId: idSchema.optional() });

export const PROTOCOL_SORTS = ["name", "-name", "changed", "-changed", "campaigns", "-campaigns", "versions", "-versions"] as const;

export const protocolQuery = pageQuery.extend({
  sort: z.enum(PROTOCOL_SORTS).default("-changed"),
  show: z.enum(["inUse", "drafts", "retired"]).default("inUse").describe("drafts: those with changes that no version has"),
  search: z.string().max(100).optional(),
});

const definition = z.custom<Definition>((value) => typeof value === "object" && value !== null).describe("The procedure, as handed in, with every id and default");

const range = z.object({ low: z.number(), likely: z.number(), high: z.number() });

export const protocolCreated = z.object({ id: z.string(), versionId: z.string(), version: z.int() });

export const draftSaved = z.object({ id: z.string(), name: z.string(), draftSavedAt: time.nullable() });

/** One line of the list. */
export const protocolItem = z.object({
  id: z.string(),
  name: z.string(),
  /** Newest version; null while there is only a draft. */
  version: z.int().nullable(),
  versionId: z.string().nullable(),
  versions: z.int(),
  campaigns: z.int(),
  hasDraft: z.boolean(),
  changedAt: time,
  changedBy: z.string().nullable(),
  retiredAt: time.nullable(),
  /** Of the newest version, on a rig and sensor like most. */
  estimate: z.object({ seconds: range, wasteMl: z.number() }).nullable(),
});

export const protocolPage = pageOf(protocolItem);

export const versionItem = z.object({
  id: z.string(),
  version: z.int(),
  note: z.string().nullable(),
  savedAt: time,
  savedBy: z.string().nullable(),
  campaigns: z.int(),
});

export const versionPage = pageOf(versionItem);

export const versionAnswer = versionItem.extend({ protocolId: z.string(), protocolName: z.string(), definition });

export const protocolAnswer = z.object({
  id: z.string(),
  name: z.string(),
  createdAt: time,
  createdBy: z.string().nullable(),
  retiredAt: time.nullable(),
  campaigns: z.int(),
  draft: z.record(z.string(), z.unknown()).nullable(),
  draftSavedAt: time.nullable(),
  /** Newest first; the newest 200. */
  versions: z.array(versionItem),
});

export const estimateAnswer = z.object({
  seconds: range,
  steps: z.number(),
  repeats: z.number(),
  phases: z.number(),
  cycles: z.number(),
  mlPerSlot: z.record(z.string(), z.number()),
  wasteMl: z.number(),
  atMost: z.object({ mlPerSlot: z.record(z.string(), z.number()), wasteMl: z.number() }),
  people: z.object({ asks: z.number(), bottles: z.record(z.string(), z.number()) }),
  isExact: z.boolean().describe("False where long loops were multiplied"),
  /** What one turn of each step takes, by its id; the first few thousand steps only. */
  blocks: z.record(z.string(), z.object({ seconds: z.number(), ml: z.number() })),
  /** The likely course, begun now; the first few hundred steps where there are more. */
  strip: z.object({ from: time, to: time, isWhole: z.boolean(), segments: z.array(stripSegment) }),
  problems: z.array(z.object({ path: z.string().describe("Within the definition: blocks.2.sweep.points"), severity: z.enum(["error", "warning"]), message: z.string() })),
});

export type ProtocolQuery = z.output<typeof protocolQuery>;
export type ProtocolSort = ProtocolQuery["sort"];
export type ProtocolItem = z.output<typeof protocolItem>;
export type ProtocolAnswer = z.output<typeof protocolAnswer>;
export type VersionItem = z.output<typeof versionItem>;
export type VersionAnswer = z.output<typeof versionAnswer>;
export type EstimateAnswer = z.output<typeof estimateAnswer>;
