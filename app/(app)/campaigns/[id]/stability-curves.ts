import type { DeviationCurve, DeviationPoint } from "@/components/charts/deviation";
import type { Dash, Pen } from "@/components/charts/pens";
import type { PlotQuantity } from "@/components/charts/plot-quantity";
import type { StabilityAnswer } from "@/lib/analysis/schema";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import type { Statistic } from "./view";

type Medium = CampaignAnswer["media"][number];

const DASHES: readonly Dash[] = ["solid", "dashed", "dotted"];

/** Air in ink, liquids in their tints; liquids of one tint are told apart by their dash. */
function pensOf(media: readonly Medium[]): Map<string, { pen: Pen; dash?: Dash }> {
  const used = new Map<number, number>();
  const pens = new Map<string, { pen: Pen; dash?: Dash }>();
  for (const { medium, tint } of media) {
    const times = tint ? (used.get(tint) ?? 0) : 0;
    if (tint) used.set(tint, times + 1);
    pens.set(medium, tint ? { pen: `liquid-${tint}`, ...(times > 0 && { dash: DASHES[(tint - 1 + times) % 3] }) } : { pen: "ink" });
  }
  return pens;
}

export const toDeviationPoint = ({ tauS, deviation, lower, upper, n, noise, noiseMarked }: StabilityAnswer["points"][number]): DeviationPoint => ({
  tau: tauS,
  deviation,
  low: lower,
  high: upper,
  n,
  noise,
  ...(noiseMarked && { assumed: true }),
});

/** Curves of all media that have points; within phases and from phase to phase as asked. */
export function curvesOf(media: readonly Medium[], within: readonly (StabilityAnswer | undefined)[], across: readonly (StabilityAnswer | undefined)[]): DeviationCurve[] {
  const pens = pensOf(media);
  return media.flatMap(({ medium, name }, i) => {
    const inside = within[i]?.points ?? [];
    const between = across[i]?.points ?? [];
    if (inside.length + between.length === 0) return [];
    return [{ id: medium, label: medium === "air" ? "air" : name, ...(pens.get(medium) ?? { pen: "ink" as const }), within: inside.map(toDeviationPoint), across: between.map(toDeviationPoint) }];
  });
}

export const STATISTICS: Record<Statistic, { label: string; quantity: PlotQuantity }> = {
  oadev: { label: "overlapping Allan deviation", quantity: { symbol: "σ", sub: "y" } },
  adev: { label: "Allan deviation", quantity: { symbol: "σ", sub: "y" } },
  mdev: { label: "modified Allan deviation", quantity: { words: "Mod", symbol: "σ", sub: "y" } },
  tdev: { label: "time deviation", quantity: { symbol: "σ", sub: "x", unit: "s" } },
  ohdev: { label: "overlapping Hadamard deviation", quantity: { words: "H", symbol: "σ", sub: "y" } },
  hdev: { label: "Hadamard deviation", quantity: { words: "H", symbol: "σ", sub: "y" } },
  totdev: { label: "total deviation", quantity: { words: "Tot", symbol: "σ", sub: "y" } },
};
