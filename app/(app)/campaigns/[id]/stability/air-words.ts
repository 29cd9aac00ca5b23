import type { AirReturnAnswer } from "@/lib/analysis/schema";
import { formatCount, formatNumber, formatUncertain, plural } from "@/lib/format";
import { formatDuration } from "@/lib/format-time";

const two = (value: number) => formatNumber(Number(value.toPrecision(2)));

/** The verdict as a sentence. */
export function airWords({ verdict, growth, steps, n }: AirReturnAnswer): string {
  const total = growth ? `${formatNumber(Number(growth.totalPpm.toPrecision(2)), { signed: true })}\u00a0ppm over the record` : "";
  switch (verdict) {
    case "too few":
      return `${n === 0 ? "No air reference has" : `${formatCount(n)} air ${plural(n, "reference has", "references have")}`} followed an ordinary clean; ten are needed to tell residue from ageing.`;
    case "none":
      return "Nothing that keeps the air reference away can be told from its noise.";
    case "residue":
      return `Residue builds up: the air reference moves by ${total}, and loss comes with it.`;
    case "ageing":
      return `The sensor ages: the air reference moves by ${total} without loss, and cleaning does not bring it back.`;
    case "step":
      return `${steps.length === 1 ? "A step keeps" : `${formatCount(steps.length)} steps keep`} the air reference away: ${steps.map(({ f0Ppm, f0U }) => `${formatUncertain(f0Ppm, f0U, { signed: true })}\u00a0ppm`).join(", ")}.`;
    case "undecided":
      return `The air reference moves by ${total}; whether residue or ageing, cannot be told.`;
  }
}

/** What the verdict rests on. */
export function growthWords({ growth, cleanedAgain, used }: AirReturnAnswer): string {
  const parts = [`From ${used}.`];
  if (growth) {
    const q = { falls: "falls", quiet: "stays", rises: "rises", unclear: "is unclear" }[growth.q];
    parts.push(`f₀ moves by ${formatUncertain(growth.f0PpmPerDay, growth.f0U, { signed: true })}\u00a0ppm a day; Q ${q}: ${formatUncertain(growth.qPercentPerDay, growth.qU, { signed: true })}\u00a0% a day.`);
    if (growth.lossFactor !== null && growth.lossFactorU !== null && growth.lossFactorU < 100) parts.push(`What grew would have a loss factor of ${formatUncertain(growth.lossFactor, growth.lossFactorU)}: near 0 without loss, a tenth or more for a liquid or soft film.`);
  }
  const { times, takesOff, share, shareU } = cleanedAgain;
  if (takesOff === "untried") parts.push("Cleaning once more was never tried; it would help to tell.");
  else parts.push(`Cleaned again ${times === 1 ? "once" : `${formatCount(times)} times`}: it ${takesOff === "yes" ? "takes off" : takesOff === "no" ? "does not take off" : "may or may not take off"} what had grown${share !== null && shareU !== null ? `, a share of ${formatUncertain(share, shareU)}` : ""}.`);
  return parts.join(" ");
}

/** How the sensor cools after drying, and how many repeats to leave out. */
export function coolingWords(cooling: AirReturnAnswer["cooling"]): string {
  if (!cooling) return "Cooling is looked for from ten repeats in phases of five or more on.";
  const { transient, discard, phases, n } = cooling;
  const from = `From ${formatCount(n)} repeats of ${formatCount(phases)} ${plural(phases, "phase")}.`;
  if (!transient?.isSignificant) return `No return after drying stands out; no repeat needs to be left out for it. ${from}`;
  const returns = `After drying f₀ returns by ${formatUncertain(transient.amplitude * 1000, transient.amplitudeU * 1000, { signed: true })}\u00a0mHz with a time constant of ${formatUncertain(transient.tauS, transient.tauU)}\u00a0s.`;
  const tolerance = `${two(discard.tolerance * 1e6)}\u00a0µHz`;
  if (discard.repeats === null) return `${returns} Even half a phase left out would not bring its effect below ${tolerance}: wait longer before measuring. ${from}`;
  if (discard.repeats === 0) return `${returns} By the first repeat it is harmless: it leaves ${two(Math.abs(discard.biasLeft) * 1e6)}\u00a0µHz in a phase value. ${from}`;
  return `${returns} Leave out the first ${formatCount(discard.repeats)} ${plural(discard.repeats, "repeat")}, or wait ${formatDuration(discard.waitS)}: it then leaves less than ${tolerance} in a phase value. ${from}`;
}
