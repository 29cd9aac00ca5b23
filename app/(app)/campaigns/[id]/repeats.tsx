"use client";

import { keepPreviousData, useQuery } from "@tanstack/react-query";
import { useMemo, type ReactNode } from "react";
import { TimeSeriesChart } from "@/components/charts/time-series-chart";
import { PhaseChip } from "@/components/ui/phase-chip";
import { Section } from "@/components/ui/page";
import { Empty, Loading, Problem } from "@/components/ui/states";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { backToAirOptions, driftOptions, seriesOptions, stripOptions } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount } from "@/lib/format";
import { DriftWords } from "./drift-words";
import { panelsOf, phasesOf, referenceOf } from "./repeats-data";
import { useOpenRepeat } from "./use-open-repeat";
import { setPointOf, type View } from "./view";

type RepeatsProps = {
  campaign: CampaignAnswer;
  view: View;
  set: (changes: Record<string, string | null>) => void;
  onWindow: (from: string, to: string) => void;
  onWhole: () => void;
  companion: ReactNode;
};

const POINTS = 800;

/** f0, Q and temperature of all repeats in one medium, with the drift line through its phase values. */
export function Repeats({ campaign, view, set, onWindow, onWhole, companion }: RepeatsProps) {
  const { medium, window, openGaps } = view;
  const setPointC = setPointOf(view, campaign.setPointsC);
  const ask = { medium, setPointC };
  const plot = { ...ask, points: POINTS, from: window?.from, to: window?.to };
  const f0 = useQuery(seriesOptions(campaign.id, { ...plot, quantity: "f0" }));
  const q = useQuery(seriesOptions(campaign.id, { ...plot, quantity: "q" }));
  const temperature = useQuery(seriesOptions(campaign.id, { ...plot, quantity: "temperature" }));
  const drift = useQuery(driftOptions(campaign.id, { ...ask, quantity: "f0" }));
  const back = useQuery({ ...backToAirOptions(campaign.id), placeholderData: keepPreviousData });
  const strip = useQuery(stripOptions(campaign.id));
  const name = campaign.media.find((one) => one.medium === medium)?.name ?? medium;
  const isAir = medium === "air";
  const openRepeat = useOpenRepeat(campaign.id, medium);

  const letterOf = useMemo(() => lettersBefore(strip.data, medium), [strip.data, medium]);
  const phases = useMemo(() => (f0.data ? phasesOf(f0.data, (phaseId) => letterOf.get(phaseId)) : []), [f0.data, letterOf]);
  const waits = drift.isPending || (isAir && back.isPending);
  const referenceHz = waits ? undefined : referenceOf({ baselineHz: isAir ? back.data?.baselineHz : null, drift: drift.data, series: f0.data });
  const limitMHz = isAir && back.data?.limitPpm && referenceHz !== undefined ? back.data.limitPpm * 1e-3 * referenceHz : null;
  const panels = useMemo(
    () => (f0.data && referenceHz !== undefined ? panelsOf({ name, f0: f0.data, q: q.data, temperature: temperature.data, drift: drift.data, referenceHz, limitMHz, phases }) : []),
    [f0.data, q.data, temperature.data, drift.data, referenceHz, limitMHz, phases, name],
  );
  const whole = strip.data && { from: strip.data.from, to: strip.data.now ?? strip.data.to };
  const error = f0.error ?? q.error ?? temperature.error ?? drift.error;
  const from = window?.from ?? phases[0]?.from;
  const to = window?.to ?? phases.at(-1)?.to;
  return (
    <Section
      id="repeats"
      head="Repeats"
      note={openGaps ? "Time is true to scale." : "Time between phases is closed up. The marks under the axis say what happened in the gap."}
      controls={<Choices campaign={campaign} view={view} set={set} />}
    >
      <div className="split">
        <div aria-busy={f0.isFetching}>
          {error && <Problem error={error} onRetry={() => void Promise.all([f0, q, temperature, drift].filter((one) => one.error).map((one) => one.refetch()))} />}
          {panels.length > 0 && from && to && Date.parse(to) > Date.parse(from) ? (
            <TimeSeriesChart
              label={`Repeats of ${campaignCode(campaign.id)} in ${name}: f0, Q and temperature against time`}
              sentence={f0.data && drift.data && <DriftWords drift={drift.data} name={name} n={f0.data.n} leftOut={f0.data.leftOut} />}
              file={`${campaignCode(campaign.id)}-repeats-${medium}`}
              panels={panels}
              from={from}
              to={to}
              zone={campaign.timeZone}
              phases={phases}
              closeGaps={!openGaps}
              onWindow={(a, b) => (whole && a === whole.from && b === whole.to ? onWhole() : onWindow(a, b))}
              whole={window ? whole : undefined}
              onOpen={openRepeat}
            />
          ) : (
            !error && (f0.isPending || waits ? <Loading label="the repeats" height={460} /> : <Empty>{window ? `No repeat in ${name} lies in this stretch of time.` : `No repeat in ${name} has been fitted yet.`}</Empty>)
          )}
        </div>
        {companion}
      </div>
    </Section>
  );
}

/** Under the break before a phase stands the letter of what was in the cell since the phase before. */
function lettersBefore(strip: { segments: { kind: string; medium?: string; phaseId?: string; planned?: boolean }[]; liquids: { slot: string; letter: string }[] } | undefined, medium: string): Map<string, string> {
  const letters = new Map<string, string>();
  let between: string | undefined;
  for (const segment of strip?.segments ?? []) {
    if (segment.planned || !segment.phaseId) continue;
    const of = segment.kind === "air" ? "air" : segment.medium;
    if (of === medium) {
      if (between) letters.set(segment.phaseId, between);
      between = undefined;
    } else between = of === "air" ? "A" : strip?.liquids.find(({ slot }) => slot === of)?.letter;
  }
  return letters;
}

function Choices({ campaign: { media, setPointsC }, view, set }: Pick<RepeatsProps, "campaign" | "view" | "set">) {
  return (
    <>
      <div className="choices" role="group" aria-label="Medium">
        {media.map(({ medium, name, letter, tint, repeats }) => (
          <button key={medium} type="button" aria-pressed={view.medium === medium} onClick={() => set({ medium: medium === "air" ? null : medium })}>
            {medium === "air" ? <PhaseChip kind="air" /> : letter && tint ? <PhaseChip kind="liquid" letter={letter} tint={tint} /> : null}
            {name}
            <em>{formatCount(repeats)}</em>
          </button>
        ))}
      </div>
      {setPointsC.length > 1 && (
        <>
          <p className="choices-head">Cell at</p>
          <div className="choices" role="group" aria-label="Set-point">
            {setPointsC.map((c) => (
              <button key={c} type="button" aria-pressed={setPointOf(view, setPointsC) === c} onClick={() => set({ setPointC: String(c) })}>{c}&#8239;°C</button>
            ))}
          </div>
        </>
      )}
      <p className="choices-head">Time</p>
      <div className="choices" role="group" aria-label="Time axis">
        <button type="button" aria-pressed={!view.openGaps} onClick={() => set({ gaps: null })}>Gaps closed</button>
        <button type="button" aria-pressed={view.openGaps} onClick={() => set({ gaps: "open" })}>True to scale</button>
      </div>
    </>
  );
}
