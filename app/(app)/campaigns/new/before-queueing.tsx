import { LinkButton } from "@/components/ui/button";
import { Findings, type Finding } from "@/components/ui/tag";
import type { CheckAnswer, Choices } from "@/lib/campaigns/draft-schema";
import { ProblemError } from "@/lib/http/fetch-json";
import { RepairButtons } from "./repair-buttons";
import { repairsOf } from "./repairs";
import type { Draft } from "./use-draft";

/** Must fix and Check, in a column of their own. */
export function BeforeQueueing({ findings, ready }: { findings: readonly Finding[]; ready: boolean }) {
  return (
    <aside className="mt-5 border-t border-rule2 pt-4" aria-live="polite">
      <h2 className="mb-1 text-t4 font-semibold">Before it can be queued</h2>
      {findings.length > 0 ? <Findings items={findings} /> : <p className="text-ink2">{ready ? "Nothing stands in the way." : "It is being checked."}</p>}
    </aside>
  );
}

type Known = { draft: Draft; choices: Choices; checked: CheckAnswer | undefined; error: Error | null; onChange: (changes: Partial<Draft>) => void };

export function findingsOf({ draft, choices, checked, error, onChange }: Known): Finding[] {
  const must = (text: string, repair?: { label: string; href: string }): Finding => ({ kind: "must", text, repair: repair && <LinkButton small href={repair.href}>{repair.label}</LinkButton> });
  const findings: Finding[] = [];
  if (!draft.protocolVersionId) findings.push(choices.versions.length > 0 ? must("Choose a protocol version.") : must("No protocol has a version yet.", { label: "Write a protocol", href: "/protocols/new" }));
  if (!draft.sensorId) findings.push(choices.sensors.length > 0 ? must("Choose a sensor.") : must("No sensor has been recorded yet.", { label: "New sensor", href: "/sensors/new" }));
  if (!draft.rigId) findings.push(must(choices.rigs.length > 0 ? "Choose a rig." : "No rig has been made yet; an administrator makes rigs."));
  const version = choices.versions.find(({ id }) => id === draft.protocolVersionId);
  if (version && draft.rigId)
    for (const slot of version.slots) {
      const binding = draft.slots[slot];
      if (!binding || binding.port === null || !binding.lotId) findings.push(must(`Give ${slot} a port and a lot.`));
    }
  if (findings.length > 0) return findings;
  if (error) return error instanceof ProblemError && error.fields.length > 0 ? error.fields.map(({ message }) => must(`${message}.`)) : [must(error.message)];
  const found = (checked?.problems ?? []).map((problem): Finding => {
    const repairs = repairsOf(problem, draft, choices);
    return { kind: problem.severity === "error" ? "must" : "check", text: problem.message, repair: repairs.length > 0 && <RepairButtons repairs={repairs} onChange={onChange} /> };
  });
  return found.sort((a, b) => Number(b.kind === "must") - Number(a.kind === "must"));
}
