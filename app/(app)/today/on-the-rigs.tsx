"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { useWidth } from "@/components/charts/use-width";
import { StripRuler } from "@/components/strip/strip-ruler";
import { LinkButton } from "@/components/ui/button";
import { stripsOptions } from "@/lib/campaigns/client";
import { may, type Role } from "@/lib/permissions";
import type { TodayAnswer, TodayRig } from "@/lib/today/schema";
import { DaysFromNow } from "./days-from-now";
import { RigRow } from "./rig-row";

const DAY_MS = 86_400_000;
/** Rigs whose clocks say the same to within this share one ruler of dates. */
const SAME_CLOCK_MS = 3_600_000;

export type DaysShown = { back: number; ahead: number };

/** All rigs on one axis of time: past solid at the left, plan in outline at the right, the present one line. */
export function OnTheRigs({ today: { rigs, now, laboratory }, role }: { today: TodayAnswer; role: Role }) {
  const [ref, width] = useWidth();
  const busy = rigs.filter(({ campaign }) => campaign !== null);
  const free = rigs.filter(({ campaign }) => campaign === null);
  const live = busy.some(({ campaign }) => campaign?.state === "running");
  const { data: strips } = useQuery(stripsOptions(busy.flatMap(({ campaign }) => campaign?.id ?? []), live));
  const stripOf = new Map(strips?.items.map(({ campaignId, strip }) => [campaignId, strip]));
  const days: DaysShown = width > 0 && width < 500 ? { back: 7, ahead: 4 } : { back: 10, ahead: 9 };
  const shared = sharedClock(busy);
  const around = (ms: number) => new Date((shared ?? Date.parse(now)) + ms * DAY_MS).toISOString();

  return (
    <section className="on-the-rigs" aria-label="On the rigs">
      <div className="page-row">
        <div className="margin pt-px"><h2>On the rigs</h2></div>
        <div className="rig-columns">
          <div ref={ref} className="h-6">
            {busy.length > 0 && (shared === undefined ? <DaysFromNow {...days} /> : <StripRuler from={around(-days.back)} to={around(days.ahead)} now={around(0)} zone={laboratory.timeZone} />)}
          </div>
        </div>
      </div>
      {busy.map((rig) => <RigRow key={rig.id} rig={rig} strip={stripOf.get(rig.campaign?.id ?? "")} days={days} ownTime={shared === undefined} now={now} />)}
      {free.length > 0 && (
        <div className="page-row rig-row">
          <div className="margin"><h3>Free</h3></div>
          <div className="rig-columns">
            <p className="py-3">
              {free.map(({ id, name, next }, i) => (
                <span key={id}>
                  {i > 0 && ", "}
                  <Link href={`/rigs/${id}`}>{name}</Link>
                  {next && <span className="text-ink2"> (next: {next.name})</span>}
                </span>
              ))}
              .
            </p>
            {may(role, "edit campaigns") && <div className="py-2"><LinkButton small href="/campaigns/new">Queue a campaign</LinkButton></div>}
          </div>
        </div>
      )}
    </section>
  );
}

/** The time that all rigs' clocks say; undefined when simulated clocks are elsewhere in time. */
function sharedClock(rigs: readonly TodayRig[]): number | undefined {
  const clocks = rigs.map((rig) => Date.parse(rig.now ?? ""));
  if (clocks.length === 0 || clocks.some(Number.isNaN)) return undefined;
  const latest = Math.max(...clocks);
  return latest - Math.min(...clocks) <= SAME_CLOCK_MS ? latest : undefined;
}
