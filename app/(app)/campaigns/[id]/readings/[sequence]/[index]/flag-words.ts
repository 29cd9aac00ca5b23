import { formatNumber, listOf } from "@/lib/format";
import type { SweepAnswer } from "@/lib/readings/schema";

type Judged = NonNullable<SweepAnswer["judged"]>;

export type FlagWords = { flag: string; head: string; rest: string };

const few = (value: number) => formatNumber(Number(value.toPrecision(2)));
const COUNTS = "The repeat counts, and is noted.";
const LEFT_OUT = "The repeat is left out of the phase value.";

/** What each flag says and does to the phase value, with the figure that it was judged by where there is one. */
export function flagWords(flags: readonly string[], judged: Judged | null | undefined, snr: number | null | undefined): FlagWords[] {
  return flags.map((flag) => ({ flag, ...wordsOf(flag, judged, snr) }));
}

function wordsOf(flag: string, judged: Judged | null | undefined, snr: number | null | undefined): Omit<FlagWords, "flag"> {
  switch (flag) {
    case "failed":
      return { head: "Nothing could be fitted", rest: `no resonance stands out of this sweep. ${LEFT_OUT}` };
    case "edge":
      return { head: "The resonance lies at the edge of the sweep", rest: `f₀ is outside its middle 80 %. ${LEFT_OUT}` };
    case "bent":
      return { head: "The peak is bent", rest: `the frequency follows the amplitude by more than a tenth of a half-width, significant at 4σ; less drive would help. ${LEFT_OUT}` };
    case "narrow":
      return { head: "The sweep is narrow", rest: `it spans ${judged ? `${few(judged.spanHalfWidths)} half-widths, ` : ""}less than 2.5. ${COUNTS}` };
    case "sparse":
      return { head: "Few points lie on the peak", rest: `${judged ? `${judged.pointsInBand} inside half power, ` : ""}fewer than 3. ${COUNTS}` };
    case "noisy":
      return { head: "The signal is weak", rest: `signal to noise ${snr == null ? "" : `${few(snr)}, `}below 5. ${COUNTS}` };
    case "distorted":
      return { head: "The residuals follow each other", rest: `${judged ? `lag-1 correlation ${few(judged.lag1)}, more than ${few(judged.lag1Limit)}. ` : ""}A bubble or a second mode can do this. ${COUNTS}` };
    case "rushed":
      return { head: "The sweep was hurried", rest: `each point had ${judged?.dwellRingDowns ? `${few(judged.dwellRingDowns)} ring-down times, ` : ""}less than 5. ${COUNTS}` };
    case "clock":
      return { head: "The rig’s clock is doubtful", rest: `the time of this repeat does not fit its neighbours; its order does. ${COUNTS}` };
    case "late":
      return { head: "It came late", rest: "after its phase had closed. It never counts." };
    default:
      return { head: flag, rest: COUNTS };
  }
}

/** What is well, in a few sentences. */
export function wellWords(flags: readonly string[], judged: Judged | null | undefined): string {
  if (!judged || flags.includes("failed")) return "";
  const is = (flag: string) => !flags.includes(flag);
  return [
    `Converged.`,
    is("edge") && "f₀ lies in the middle of the sweep.",
    (is("narrow") || is("sparse")) && `Span is ${few(judged.spanHalfWidths)} half-widths, with ${judged.pointsInBand} points inside half power.`,
    is("noisy") && "Signal is strong.",
    is("distorted") && "Residuals are free of each other.",
    is("rushed") && judged.dwellRingDowns !== null && `Dwell is ${few(judged.dwellRingDowns)} ring-down times.`,
    is("bent") && "Peak not bent at 4σ.",
    (is("clock") || is("late")) && `${listOf([is("clock") ? "Clock right" : "", is("late") ? "not late" : ""].filter(Boolean)).replace(" and ", ", ")}.`,
  ]
    .filter(Boolean)
    .join(" ");
}
