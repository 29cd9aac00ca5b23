import { PhaseChip } from "@/components/ui/phase-chip";
import type { LooseFields } from "@/lib/protocol/sentence";

/** The letter and texture of what a step does to the cell, as in the run strip; nothing for waits, questions and temperatures. */
export function StepChip({ block }: { block: LooseFields }) {
  switch (block.kind) {
    case "measure":
      return block.medium === "air" ? <PhaseChip kind="air" /> : <PhaseChip kind="liquid" letter="L" tint={2} />;
    case "fill":
      return <PhaseChip kind="fill" />;
    case "drain":
    case "rinse":
      return <PhaseChip kind="clean" />;
    case "dry":
      return <PhaseChip kind="dry" />;
    default:
      return <span aria-hidden="true" />;
  }
}
