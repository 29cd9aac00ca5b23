import { asDuration, at, count, type LooseFields, plain, type SentencePart } from "./sentence";

const DOES: Readonly<Record<string, string>> = { note: "note it", mail: "mail", hold: "hold", cleanAgain: "clean again", stop: "stop" };
const QUANTITIES: Readonly<Record<string, string>> = { f0: "f₀", q: "Q" };

/** A limit as a sentence in parts: `If air f₀ returns beyond 15 ppm: mail, clean again.` */
export function limitParts(limit: LooseFields): SentencePart[] {
  const value = (path: string, write: (given: unknown) => string = plain) => ({ value: write(at(limit, path)), path });
  const medium: SentencePart[] = limit.medium === undefined ? [] : [" in ", value("medium")];
  const quantity = value("quantity", (q) => QUANTITIES[String(q)] ?? plain(q));
  const does = value("does", (given) => (Array.isArray(given) && given.length > 0 ? given.map((one) => DOES[String(one)] ?? plain(one)).join(", ") : plain(undefined)));
  return ["If ", ...rule(), ": ", does, ...(limit.deadTimeS === undefined ? [] : [", at most once in ", value("deadTimeS", asDuration)]), "."];

  function rule(): SentencePart[] {
    switch (limit.kind) {
      case "return":
        return [
          "the reference",
          ...medium,
          " is off by more than ",
          ...(limit.tolerancePpm === undefined ? [] : [value("tolerancePpm", (p) => `${plain(p)} ppm`)]),
          ...(limit.tolerancePpm !== undefined && limit.toleranceQPercent !== undefined ? [" or "] : []),
          ...(limit.toleranceQPercent === undefined ? [] : [value("toleranceQPercent", (p) => `${plain(p)} %`), " in Q"]),
          ...(limit.tolerancePpm === undefined && limit.toleranceQPercent === undefined ? [value("tolerancePpm")] : []),
        ];
      case "drift":
        return limit.ppmPerDay === undefined
          ? [quantity, ...medium, " drifts so that it crosses ", value("crossesPpm", (p) => `${plain(p)} ppm`), " within ", value("withinDays", (n) => count(n, "day"))]
          : [quantity, ...medium, " drifts by more than ", value("ppmPerDay", (p) => `${plain(p)} ppm`), " a day"];
      case "step":
        return [quantity, ...medium, " steps by ", value("sigma", (s) => `${plain(s)} σ`)];
      case "noise":
        return ["the variance of ", quantity, ...medium, " grows by a factor of ", value("factor")];
      case "fit":
        return ["more than ", value("sharePercent", (p) => `${plain(p)} %`), " of a phase", ...medium, " cannot be fitted"];
      case "temperature":
        return ["the cell leaves ", value("minC", (t) => `${plain(t)} °C`), " to ", value("maxC", (t) => `${plain(t)} °C`), ...medium];
      case "silence":
        return ["the rig is silent for ", value("afterS", asDuration)];
      case "count":
        return [value("failedSteps", (n) => count(n, "attempt")), " fail in a row"];
      default:
        return [plain(undefined)];
    }
  }
}
