"use client";

import { keepPreviousData, useQuery } from "@tanstack/react-query";
import { PageRow, PageTitle, Section, Vitals, type Vital } from "@/components/ui/page";
import { PhaseChip } from "@/components/ui/phase-chip";
import { F0, Q, Quantity } from "@/components/ui/quantity";
import { Loading, Problem } from "@/components/ui/states";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { campaignOptions, sweepOptions } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount, formatNumber, NO_VALUE } from "@/lib/format";
import { formatDay, formatDuration, formatSecond } from "@/lib/format-time";
import { may, type Role } from "@/lib/permissions";
import type { SweepAnswer } from "@/lib/readings/schema";
import { Flags } from "./flags";
import { InItsPhase } from "./in-its-phase";
import { LeaveOut } from "./leave-out";
import { Parameters } from "./parameters";
import { SweepAndFit } from "./sweep-and-fit";
import { WalkButtons } from "./walk-buttons";

type ReadingScreenProps = { campaignId: string; sequence: number; index: number; role: Role };

/** One repeat: its sweep and fit, what its flags say, its place in the phase, and leaving it out. */
export function ReadingScreen({ campaignId, sequence, index, role }: ReadingScreenProps) {
  const { data: campaign } = useQuery(campaignOptions(campaignId));
  const { data: sweep, error, refetch, isPlaceholderData } = useQuery({ ...sweepOptions(campaignId, { sequence, index }), placeholderData: keepPreviousData });
  if (!campaign || !sweep) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the repeat" height={480} />}</Section>;

  const { place, medium, cycle } = sweep;
  const liquid = campaign.media.find((one) => one.medium === medium);
  const name = medium === "air" ? "Air" : (liquid?.name ?? medium);
  const code = campaignCode(campaignId);
  return (
    <div aria-busy={isPlaceholderData}>
      <PageTitle
        margin={
          <>
            <div className="flex items-center gap-2">
              {medium === "air" ? <PhaseChip kind="air" /> : liquid?.letter && liquid.tint ? <PhaseChip kind="liquid" letter={liquid.letter} tint={liquid.tint} /> : null}
              <b>{name}</b>
            </div>
            <div>cycle {cycle}, step {sweep.sequence}{campaign.rig && `, ${campaign.rig}`}</div>
          </>
        }
        crumbs={[{ label: "Campaigns", href: "/campaigns" }, { label: code, href: `/campaigns/${code}` }, { label: `cycle ${cycle}, ${name}` }]}
        meta={takenWords(sweep, campaign)}
        actions={<WalkButtons code={code} sweep={sweep} />}
      >
        Repeat {formatCount(sweep.index + 1)}{place && ` of ${formatCount(place.repeats)}`}
      </PageTitle>
      <PageRow>
        {error && <div className="mt-4"><Problem error={error} onRetry={() => void refetch()} /></div>}
        <Vitals items={vitalsOf(sweep)} />
      </PageRow>
      <SweepAndFit sweep={sweep} code={code} name={name} />
      <Section head="Parameters" note={parameterNote(sweep)}>
        <div className="split">
          <Parameters sweep={sweep} />
          <Flags sweep={sweep} />
        </div>
      </Section>
      {place && <InItsPhase sweep={sweep} place={place} code={code} />}
      {place && may(role, "exclude readings") && <LeaveOut key={`${sweep.sequence}-${sweep.index}`} campaignId={campaignId} sweep={sweep} place={place} />}
    </div>
  );
}

function parameterNote({ form, fitRunId, readout }: SweepAnswer): string {
  const how = form === "sweep" ? "Standard uncertainties from the full Jacobian and the residual variance." : form === "fitted" ? "Fitted on the rig; taken as given." : "Standard uncertainties from the residual variance.";
  return `${how}${fitRunId ? ` Fit run ${fitRunId}` : ""}${readout ? `, ${readout} readout` : ""}.`;
}

function takenWords({ takenAt, durationS, curve, points, dwellS, driveV, form }: SweepAnswer, { timeZone, now }: CampaignAnswer): string {
  const took = durationS ? `, in ${formatDuration(durationS)}` : "";
  const taken = `Taken ${formatDay(takenAt, timeZone, now)} ${formatSecond(takenAt, timeZone)}${took}.`;
  if (form === "fitted") return `${taken} Fitted on the rig, no sweep was sent.`;
  if (form === "ringDown") return `${taken} A ring-down of ${formatCount(points)} samples.`;
  if (!curve) return taken;
  const ends = [curve.frequencyHz[0], curve.frequencyHz.at(-1)].map((hz) => formatNumber(Number((hz ?? NaN).toPrecision(7))));
  const dwell = dwellS ? `, dwell ${formatNumber(Number((dwellS * 1000).toPrecision(3)))}\u00a0ms` : "";
  const drive = driveV ? `, drive ${formatNumber(Number((driveV * 1000).toPrecision(3)))}\u00a0mV` : "";
  return `${taken} Sweep ${ends[0]} to ${ends[1]}\u00a0Hz, ${formatCount(points)} points${dwell}${drive}${form === "magnitude" ? ", magnitude only" : ""}.`;
}

function vitalsOf({ f0Hz, f0StdHz, q, qStd, snr, temperatureC, pressurePa, humidityPercent }: SweepAnswer): Vital[] {
  const room = [pressurePa != null && `${formatNumber(pressurePa / 1000, { decimals: 2 })}\u00a0kPa`, humidityPercent != null && `${formatNumber(humidityPercent, { decimals: 0 })}\u00a0% humidity`].filter(Boolean).join(", ");
  const ringDown = f0Hz !== null && q !== null ? `one ring-down is ${formatNumber(Number(((q / (Math.PI * f0Hz)) * 1000).toPrecision(2)))}\u00a0ms` : undefined;
  return [
    { label: "Frequency", value: f0Hz === null ? "not fitted" : <><F0 /> <Quantity value={f0Hz} u={f0StdHz} unit="Hz" decimals={4} /></> },
    { label: "Quality factor", value: q === null ? "not fitted" : <><Q /> <Quantity value={q} u={qStd} decimals={2} /></> },
    { label: "Signal to noise, per quadrature", value: snr == null ? NO_VALUE : formatNumber(Number(snr.toPrecision(snr >= 1000 ? 4 : 3))), note: ringDown },
    { label: "Cell and room", value: temperatureC == null ? NO_VALUE : `${formatNumber(temperatureC, { decimals: 3 })}\u00a0°C`, note: room || undefined },
  ];
}
