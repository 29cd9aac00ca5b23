import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { formatCount } from "@/lib/format";

export const PLACES = ["here", "phase", "cycle"] as const;
export type From = (typeof PLACES)[number];

type Step = Pick<NonNullable<CampaignAnswer["step"]>, "kind" | "label" | "state" | "stored" | "repeats">;
type Standing = Pick<CampaignAnswer, "cycle" | "parking"> & { step: Step | null };

/** What each place to go on from is called and what it means; a step that measures nothing is no phase. */
export function wordsOf({ step, cycle, parking }: Standing): Record<From, { name: string; means: string }> {
  const stored = step?.kind === "measure" ? step.stored : 0;
  return {
    here: { name: "Here", means: hereMeans(step, stored) },
    phase: !step || step.kind === "measure" ? phaseWords(stored) : stepWords(step, parking),
    cycle: { name: "This cycle", means: cycle > 0 ? `Begins cycle ${formatCount(cycle)} again, with its reference.` : "Begins the cycle again." },
  };
}

function hereMeans(step: Step | null, stored: number): string {
  if (!step || step.state === "done") return "Goes on with the next step.";
  if (step.kind !== "measure") return `Goes on with “${step.label}”.`;
  return step.repeats && stored < step.repeats ? `Goes on with repeat ${formatCount(stored + 1)} of ${formatCount(step.repeats)}.` : "Goes on with the next step.";
}

const phaseWords = (stored: number) => ({
  name: "This phase",
  means: `Measures the phase again from its beginning${stored > 0 ? `; its ${formatCount(stored)} repeats stay beside` : ""}.`,
});

const stepWords = ({ label, state }: Step, parking: CampaignAnswer["parking"]) => ({
  name: "This step",
  means: state === "done" && parking === "none" ? `“${label}” is done: goes on with the next step.` : `Makes “${label}” again, with the cell as it needs it.`,
});
