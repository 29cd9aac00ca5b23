"use client";

import Link from "next/link";
import { useWidth } from "@/components/charts/use-width";
import { StripRuler } from "@/components/strip/strip-ruler";
import { HATCH } from "@/components/strip/tint";
import { StateMark } from "@/components/ui/state-mark";
import { Problem } from "@/components/ui/states";
import { campaignCode } from "@/lib/campaigns/code";
import { formatDayTime } from "@/lib/format-time";
import { may, type Role } from "@/lib/permissions";
import type { RigAnswer } from "@/lib/rigs/schema";
import type { LaneAnswer } from "@/lib/rigs/timeline-schema";
import { DaysFromNow } from "../today/days-from-now";
import { RigLane } from "./rig-lane";
import { rigWord } from "./rig-word";
import type { Moves } from "./use-moves";

const DAY_MS = 86_400_000;
/** Rigs whose clocks say the same to within this share one ruler of dates. */
const SAME_CLOCK_MS = 3_600_000;
const NARROW_PX = 620;

type WhoRunsWhatProps = { lanes: readonly LaneAnswer[]; rigs: readonly RigAnswer[]; moves: Moves; role: Role };

/** All rigs on one axis of five weeks (on a phone of seventeen days). */
export function WhoRunsWhat({ lanes, rigs, moves, role }: WhoRunsWhatProps) {
  const [ref, width] = useWidth();
  const narrow = width > 0 && width < NARROW_PX;
  const days = narrow ? { back: 3, ahead: 14 } : { back: 7.5, ahead: 27.5 };
  const around = (now: string) => ({ from: shift(now, -days.back), to: shift(now, days.ahead) });
  const shared = sharedClock(lanes);
  const mayMove = may(role, "edit campaigns");
  const canMove = mayMove && lanes.some(({ campaigns }) => campaigns.filter(({ queued }) => queued).length > 1);
  const shown = new Map(moves.shown.map((lane) => [lane.rigId, lane]));
  const rigOf = new Map(rigs.map((rig) => [rig.id, rig]));

  return (
    <section className="lanes" aria-label="Who runs what, when">
      <div className="page-row">
        <div className="margin pt-px"><h2>Who runs what, when</h2></div>
        <div ref={ref} className="h-6 min-w-0">
          {lanes[0] && (shared === undefined ? <DaysFromNow back={Math.floor(days.back)} ahead={Math.floor(days.ahead)} /> : <StripRuler {...around(shared)} now={shared} zone={lanes[0].timeZone} />)}
        </div>
      </div>
      {lanes.map((lane) => (
        <div key={lane.rigId} className="page-row lane-row">
          <div className="margin">
            <h3><Link href={`/rigs/${lane.rigId}`} className="no-underline hover:underline">{lane.name}</Link></h3>
            <RigNote rig={rigOf.get(lane.rigId)} ownTime={shared === undefined} lane={lane} />
          </div>
          <div className="lane-body">
            <RigLane lane={shown.get(lane.rigId) ?? lane} stored={lane} window={around(shared ?? lane.now)} moves={mayMove ? moves : undefined} />
          </div>
        </div>
      ))}
      <div className="page-row">
        <div className="margin" />
        <div className="pt-2.5">
          <div className="legend">
            <span><svg width="24" height="16" aria-hidden="true"><path d="M1 15L2 2H20V15" fill="none" stroke="var(--liq1-line)" strokeWidth="1.25" /></svg>queued, outline only</span>
            <span><svg width="26" height="16" aria-hidden="true"><rect width="26" height="16" fill={HATCH} /></svg>blocked</span>
            <span><svg width="28" height="10" aria-hidden="true"><path d="M1 5H27M1 1v8M27 1v8" stroke="var(--ink2)" strokeWidth="1.25" /></svg>likely range of the end</span>
            {canMove && <span className="whitespace-normal">Drag a queued campaign to another place in its rig’s line, or press M and the arrow keys.</span>}
          </div>
          <p className="small min-h-5 text-ink2" aria-live="polite">{heldInWords(moves)}</p>
          {moves.error && <Problem title="It stays where it was" error={moves.error} />}
        </div>
      </div>
    </section>
  );
}

function RigNote({ rig, lane, ownTime }: { rig: RigAnswer | undefined; lane: LaneAnswer; ownTime: boolean }) {
  const word = rig && rigWord(rig);
  return (
    <>
      {rig && word && word !== "Free" && word !== "Measuring" ? <StateMark state={word} /> : <div>{rig ? limitsOf(rig) : ""}</div>}
      {ownTime && <div className="text-ink3">{formatDayTime(lane.now, lane.timeZone)}</div>}
    </>
  );
}

function limitsOf({ abilities, ports }: RigAnswer): string {
  const { minTemperatureC, maxTemperatureC, maxDriveV } = abilities ?? {};
  const first = minTemperatureC !== undefined && maxTemperatureC !== undefined ? `${minTemperatureC} to ${maxTemperatureC} °C, ` : maxDriveV !== undefined ? `sweep to ${maxDriveV} V, ` : "";
  return `${first}${ports.length} ports`;
}

function heldInWords({ held, shown, busy }: Moves): string {
  const lane = shown.find(({ rigId }) => rigId === held?.rigId);
  const campaign = lane?.campaigns.find(({ id }) => id === held?.campaignId);
  if (!held || !lane || !campaign) return "";
  const time = (at: string) => formatDayTime(at, lane.timeZone, lane.now);
  const where = `${campaignCode(campaign.id)}, place ${held.line.indexOf(campaign.id) + 1} of ${held.line.length} in line: ${time(campaign.from)} to ${time(campaign.end.at)}.`;
  return busy ? `${where} Sending.` : held.by === "keys" ? `${where} Arrow keys move it, Enter puts it down, Escape leaves it where it was.` : where;
}

/** The latest time that all rigs' clocks say; undefined when simulated clocks are elsewhere in time. */
function sharedClock(lanes: readonly LaneAnswer[]): string | undefined {
  const clocks = lanes.map(({ now }) => Date.parse(now));
  const latest = Math.max(...clocks);
  return clocks.length > 0 && latest - Math.min(...clocks) <= SAME_CLOCK_MS ? new Date(latest).toISOString() : undefined;
}

const shift = (at: string, days: number) => new Date(Date.parse(at) + days * DAY_MS).toISOString();
