import { classNames } from "@/components/ui/class-names";
import { Findings } from "@/components/ui/tag";
import { formatCount, formatVolume, inWords, listOf, plural } from "@/lib/format";
import { formatDuration, formatDurationInWords } from "@/lib/format-time";
import type { EstimateAnswer } from "@/lib/protocols/schema";
import { PlannedStrip } from "./planned-strip";

type EstimatePanelProps = { estimate: EstimateAnswer | undefined; busy: boolean; zone: string; rigName?: string; sensorSerial?: string; stale?: boolean };

/** Time, liquids and people as sentences; it changes as one types. */
export function EstimatePanel({ estimate, busy, zone, rigName, sensorSerial, stale }: EstimatePanelProps) {
  if (!estimate) return <section><h3>Estimate</h3><p className="text-ink2">{busy ? "It is being worked out." : "It follows once nothing is missing."}</p></section>;
  const { seconds, steps, repeats, cycles, mlPerSlot, wasteMl, atMost, people, isExact } = estimate;
  const slots = Object.entries(mlPerSlot);
  return (
    <>
      <section aria-busy={busy} aria-live="polite">
        <h3>Estimate</h3>
        <p className={classNames("estimate", stale && "text-ink2")}>
          {isExact ? "" : "About "}{formatDurationInWords(seconds.likely)} on the rig, {wasteMl > 0 ? `${formatVolume(wasteMl)} of waste` : "no waste"}.
        </p>
        <p className="caption">
          {formatDuration(seconds.low)} if all goes fast, {formatDuration(seconds.high)} with slow cleaning and answers. {formatCount(steps)} {plural(steps, "step")}, {formatCount(repeats)} {plural(repeats, "repeat")}
          {cycles > 0 ? `, ${formatCount(cycles)} ${plural(cycles, "cycle")}` : ""}.{" "}
          {people.asks > 0 ? `A person is asked ${people.asks === 1 ? "once" : `${inWords(people.asks)} times`}.` : "Nobody is asked anything on the way."}
        </p>
        <PlannedStrip strip={estimate.strip} zone={zone} />
        <p className="caption">{basis(rigName, sensorSerial)}{stale && " It is of the last state without mistakes."}</p>
      </section>
      {slots.length > 0 && (
        <section>
          <h3>Liquids</h3>
          <table className="data-table">
            <thead><tr><th scope="col">Slot</th><th scope="col" className="right">Needed</th><th scope="col" className="right">At most</th></tr></thead>
            <tbody>
              {slots.map(([slot, ml]) => (
                <tr key={slot}><td>{slot}</td><td className="right num">{formatVolume(ml)}</td><td className="right num">{formatVolume(atMost.mlPerSlot[slot] ?? ml)}</td></tr>
              ))}
            </tbody>
          </table>
        </section>
      )}
    </>
  );
}

/** What stands in the way and what is odd, with the step that it is about. */
export function ProblemsPanel({ estimate, rigName, onOpen }: { estimate: EstimateAnswer; rigName?: string; onOpen?: (path: string) => void }) {
  const { problems } = estimate;
  return (
    <section aria-live="polite">
      <h3>{rigName ? `${rigName} can do this${problems.length > 0 ? ", except" : ""}` : "Looked through"}</h3>
      {problems.length === 0 ? (
        <p className="caption">Nothing is odd.</p>
      ) : (
        <Findings
          items={problems.map(({ path, severity, message }) => ({
            kind: severity === "error" ? "must" : "check",
            text: onOpen && path ? <button type="button" className="text-left underline decoration-rule3 underline-offset-[3px]" onClick={() => onOpen(path)}>{message}</button> : message,
          }))}
        />
      )}
    </section>
  );
}

function basis(rigName?: string, sensorSerial?: string): string {
  if (rigName && sensorSerial) return `Reckoned for ${listOf([rigName, sensorSerial])}.`;
  if (rigName) return `Reckoned for ${rigName} with a wire of 2 kHz.`;
  return sensorSerial ? `Reckoned for ${sensorSerial} on a rig like most.` : "Reckoned for a wire of 2 kHz on a rig like most.";
}
