import { stabilityQuery } from "@/lib/analysis/schema";

export type Statistic = ReturnType<typeof stabilityQuery.parse>["statistic"];

export type View = {
  /** `air` or a slot. */
  medium: string;
  /** The stretch of time that the plots show; the whole run without it. */
  window?: { from: string; to: string };
  /** The time between phases is left open, true to scale. */
  openGaps: boolean;
  setPointC?: number;
  quantity: "f0" | "q";
  statistic: Statistic;
  /** Which points of the stability plot are shown. */
  points: "both" | "within" | "phases";
};

const isTime = (text: string | undefined): text is string => text !== undefined && !Number.isNaN(Date.parse(text));

/** The view in an address; what is not one is left out. */
export function readView({ medium, from, to, gaps, setPointC, quantity, statistic, points }: Record<string, string | undefined>): View {
  const known = stabilityQuery.shape.statistic.safeParse(statistic);
  const windowed = isTime(from) && isTime(to) && Date.parse(from) < Date.parse(to);
  return {
    medium: medium && medium.length <= 60 ? medium : "air",
    ...(windowed && { window: { from, to } }),
    openGaps: gaps === "open",
    ...(setPointC && Number.isFinite(Number(setPointC)) && { setPointC: Number(setPointC) }),
    quantity: quantity === "q" ? "q" : "f0",
    statistic: known.success ? known.data : "oadev",
    points: points === "within" || points === "phases" ? points : "both",
  };
}

/** The set-point that the plots are about: the chosen one, else the first where there are several. */
export const setPointOf = ({ setPointC }: View, setPointsC: readonly number[]): number | undefined => setPointC ?? (setPointsC.length > 1 ? setPointsC[0] : undefined);
