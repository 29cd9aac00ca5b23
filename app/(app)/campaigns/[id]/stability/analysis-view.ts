import { stabilityQuery } from "@/lib/analysis/schema";
import { campaignIdOf } from "@/lib/campaigns/code";

const { statistic, taus, leaveOut, cycles } = stabilityQuery.shape;

export const TABS = ["stability", "drift", "temperature", "air"] as const;
export type Tab = (typeof TABS)[number];
export const BANDS = ["0.683", "0.9", "0.95"] as const;

export type AnalysisView = {
  tab: Tab;
  quantity: "f0" | "q";
  normalise: "fractional" | "absolute";
  /** Chosen media; undefined for all there are, up to four. */
  media?: string[];
  /** Another campaign's medium beside these. */
  beside?: { campaignId: string; medium: string };
  points: "both" | "within" | "phases";
  statistic: ReturnType<typeof statistic.parse>;
  taus: ReturnType<typeof taus.parse>;
  confidence: (typeof BANDS)[number];
  setPointC?: number;
  /** As in the address, `1-20`. */
  cycles?: string;
  fitRunId?: string;
  compensate: "none" | "temperature";
  /** Flags that leave out, as in the address; undefined for the usual ones. */
  leaveOut?: string;
  deadTime: "stated" | "corrected";
  window?: { from: string; to: string };
  openGaps: boolean;
};

type Address = Readonly<Record<string, string | undefined>>;

const isTime = (text: string | undefined): text is string => text !== undefined && !Number.isNaN(Date.parse(text));

/** The view in an address; what is not one is left out, so that any link shows something. */
export function readAnalysisView(address: Address): AnalysisView {
  const oneOf = <One extends string>(name: string, known: readonly One[], fallback: One): One => known.find((one) => one === address[name]) ?? fallback;
  const media = address.medium?.split(",").filter((medium) => medium.length > 0 && medium.length <= 60);
  const [besideCode = "", besideMedium] = address.with?.split(":") ?? [];
  const besideId = campaignIdOf(besideCode);
  const { from, to, setPointC } = address;
  return {
    tab: oneOf("tab", TABS, "stability"),
    quantity: oneOf("quantity", ["f0", "q"], "f0"),
    normalise: oneOf("normalise", ["fractional", "absolute"], "fractional"),
    ...(media && media.length > 0 && { media }),
    ...(besideId && { beside: { campaignId: besideId, medium: besideMedium || "air" } }),
    points: oneOf("points", ["both", "within", "phases"], "both"),
    statistic: statistic.safeParse(address.statistic).data ?? "oadev",
    taus: taus.safeParse(address.taus).data ?? "octave",
    confidence: oneOf("confidence", BANDS, "0.683"),
    ...(setPointC && Number.isFinite(Number(setPointC)) && { setPointC: Number(setPointC) }),
    ...(address.cycles && cycles.safeParse(address.cycles).success && { cycles: address.cycles }),
    ...(address.fitRunId && /^[1-9]\d{0,17}$/.test(address.fitRunId) && { fitRunId: address.fitRunId }),
    compensate: oneOf("compensate", ["none", "temperature"], "none"),
    ...(address.leaveOut && leaveOut.safeParse(address.leaveOut).success && { leaveOut: address.leaveOut }),
    deadTime: oneOf("deadTime", ["stated", "corrected"], "stated"),
    ...(isTime(from) && isTime(to) && Date.parse(from) < Date.parse(to) && { window: { from, to } }),
    openGaps: address.gaps === "open",
  };
}

/** What the calls of the API are asked alike, whatever the plot. */
export const selectionOf = ({ cycles: range, fitRunId }: AnalysisView, setPointC: number | undefined) => ({ cycles: range, fitRunId, setPointC });

/** A list in the address with one thing more or less; null, so that it leaves the address, when it is all there are. */
export function toggled(chosen: readonly string[], one: string, all: readonly string[]): string | null {
  const next = chosen.includes(one) ? chosen.filter((other) => other !== one) : all.filter((other) => other === one || chosen.includes(other));
  if (next.length === 0) return chosen.join(",");
  return all.every((other) => next.includes(other)) ? null : next.join(",");
}
