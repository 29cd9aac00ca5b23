import { limitParts } from "@/lib/protocol/limit-sentence";
import { duration } from "@/lib/protocol/labels";
import type { Definition } from "@/lib/protocol/schema";
import { count } from "@/lib/protocol/sentence";
import type { Difference } from "@/lib/protocols/compare";
import { Sentence } from "../sentence";

/** Limits as sentences. */
export function LimitList({ definition, differences }: { definition: Definition; differences?: ReadonlyMap<string, Difference> }) {
  if (definition.limits.length === 0) return <p className="text-ink2">No limit: nothing holds or mails by itself but failed steps.</p>;
  return (
    <ul className="facts">
      {definition.limits.map((limit) => {
        const difference = differences?.get(limit.id);
        return (
          <li key={limit.id} className={difference && "differs"}>
            <Sentence parts={limitParts(limit)} changed={difference?.kind === "changed" ? difference.fields : undefined} />
            {difference && <span className="visually-hidden"> (differs)</span>}
          </li>
        );
      })}
    </ul>
  );
}

/** What holds for the protocol as a whole, each in a sentence; `changed` names the fields that differ. */
export function FactList({ definition, changed }: { definition: Definition; changed?: ReadonlySet<string> }) {
  return (
    <ul className="facts">
      {factsOf(definition).map(({ field, text }) => {
        const differs = changed && [...changed].some((path) => path === field || path.startsWith(`${field}.`));
        return (
          <li key={field} className={differs ? "differs" : undefined}>
            {text}
            {differs && <span className="visually-hidden"> (differs)</span>}
          </li>
        );
      })}
    </ul>
  );
}

function factsOf({ readout, baseline, maxAttempts, parkAfterS, park, search }: Definition): { field: string; text: string }[] {
  return [
    { field: "readout", text: `The sensor is read as ${readout}.` },
    { field: "baseline", text: `The baseline is the mean of the first ${count(baseline.airReferences, "air reference")} after a mount.` },
    { field: "maxAttempts", text: `A step that stored nothing new is tried ${count(maxAttempts, "time")} before the campaign holds.` },
    {
      field: "parkAfterS",
      text: !park?.length ? "Nothing says how to park." : parkAfterS === undefined ? "The cell is parked when the campaign is stopped." : `The cell is parked when the campaign is stopped, or held for ${duration(parkAfterS)}.`,
    },
    {
      field: "search",
      text: search ? `A resonance is searched from ${search.fromHz} to ${search.toHz} Hz with ${count(search.points, "point")}.` : "A resonance is searched around the sensor's nominal or calibrated value.",
    },
  ];
}
