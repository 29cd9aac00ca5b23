"use client";

import { useState } from "react";
import { formatCount } from "@/lib/format";
import { formatDayTime } from "@/lib/format-time";
import { isPhase } from "./strip-cursor";
import type { StripInput } from "./strip-input";

type StripPhasesProps = { label: string; input: StripInput; zone: string; /** May be opened by everybody; otherwise it is for screen readers. */ shown: boolean };

/** The strip as a table: phases with start, end, liquid, repeats and mean. */
export function StripPhases({ label, input, zone, shown }: StripPhasesProps) {
  const [open, setOpen] = useState(false);
  const phases = input.segments.filter(isPhase);
  const time = (at: string) => formatDayTime(at, zone, input.now ?? input.from);
  const hasMeans = phases.some(({ mean }) => mean);
  return (
    <>
      {shown && (
        <p className="small text-ink2">
          <button type="button" className="underline decoration-rule3 underline-offset-[3px]" aria-expanded={open} onClick={() => setOpen(!open)}>
            {open ? "Without the table" : "As a table"}
          </button>
        </p>
      )}
      <div className={open ? "plot-twin" : "visually-hidden"}>
        <table className="data-table" aria-label={`${label}, phases`}>
          <thead>
            <tr>
              <th scope="col">Phase</th>
              <th scope="col">Start</th>
              <th scope="col">End</th>
              <th scope="col" className="right">Repeats</th>
              {hasMeans && <th scope="col" className="right">Mean</th>}
            </tr>
          </thead>
          <tbody>
            {phases.map((phase) => (
              <tr key={phase.from}>
                <td>{phase.cycle ? `Cycle ${phase.cycle}, ${phase.label}` : phase.label}{phase.planned && ", planned"}</td>
                <td className="num">{time(phase.from)}</td>
                <td className="num">{time(phase.to)}</td>
                <td className="right num">{phase.taken !== undefined && phase.repeats !== undefined && phase.taken < phase.repeats ? `${formatCount(phase.taken)} of ${formatCount(phase.repeats)}` : phase.repeats === undefined ? "" : formatCount(phase.repeats)}</td>
                {hasMeans && <td className="right num">{phase.mean ?? ""}</td>}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </>
  );
}
