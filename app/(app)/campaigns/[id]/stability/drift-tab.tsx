"use client";

import { TimeSeriesChart } from "@/components/charts/time-series-chart";
import { Section } from "@/components/ui/page";
import { Empty, Loading, Problem } from "@/components/ui/states";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount, formatNumber, formatUncertain } from "@/lib/format";
import type { DriftAnswer } from "@/lib/analysis/schema";
import { useView } from "../use-view";
import { phasesOf } from "../repeats-data";
import { useOpenRepeat } from "../use-open-repeat";
import type { AnalysisProps } from "./analysis-screen";
import { ChoiceList, CompensationChoice, FitRunChoice, MediaChoice, QuantityChoice, SetPointChoice, TypedChoices } from "./choices";
import { driftPanels, shownAs } from "./drift-data";
import { AgeingAndTrend, SlopeTable, StepTable } from "./drift-tables";
import { Folded } from "./folded";
import { useDrift } from "./use-drift";

/** Drift of the phase values of one medium: line with band, residuals, steps and temperature on one time base, and the numbers. */
export function DriftTab(props: AnalysisProps) {
  const { campaign, view, set } = props;
  const { onWindow, onWhole } = useView();
  const { medium, name, setPointC, drift: asked, series, temperature } = useDrift(props);
  const openRepeat = useOpenRepeat(campaign.id, medium);
  const drift = asked.error ? undefined : asked.data;
  const shown = shownAs(view.quantity, drift?.values ?? []);
  const phases = series.data ? phasesOf(series.data, () => undefined) : [];
  const whole = drift && drift.values.length > 0 ? { from: drift.values[0].at, to: new Date(Math.max(...drift.values.map(({ at }) => Date.parse(at)), Date.parse(phases.at(-1)?.to ?? drift.values[0].at))).toISOString() } : undefined;
  const from = view.window?.from ?? whole?.from;
  const to = view.window?.to ?? whole?.to;
  const code = campaignCode(campaign.id);
  return (
    <>
      <Section
        head="Choose"
        note="Phase values, bars k = 2; the line holds under correlated noise, its band is 95 %. Drag to zoom in; at the cursor + and − do, and Enter opens the repeat."
        controls={
          <Folded sentence={`${view.quantity === "f0" ? "f₀" : "Q"} in ${name}${view.compensate === "temperature" ? ", compensated for temperature" : ""}`}>
            <QuantityChoice view={view} set={set} />
            <MediaChoice {...props} one />
            <SetPointChoice {...props} chosen={setPointC} />
            <CompensationChoice view={view} set={set} />
            <TypedChoices view={view} set={set} />
            <ChoiceList label="Time" name="gaps" set={set} items={[{ value: null, label: "Gaps closed", pressed: !view.openGaps }, { value: "open", label: "True to scale", pressed: view.openGaps }]} />
            <FitRunChoice {...props} />
          </Folded>
        }
      >
        <div aria-busy={asked.isFetching}>
          {asked.error && <Problem error={asked.error} onRetry={() => void asked.refetch()} />}
          {drift && <p className="say mb-4"><DriftSentence drift={drift} name={name} scale={shown.scale} unit={shown.unit} isF0={view.quantity === "f0"} /></p>}
          {drift && from && to && Date.parse(to) > Date.parse(from) ? (
            <TimeSeriesChart
              label={`Phase values of ${code} in ${name} against time`}
              file={`${code}-drift-${view.quantity}`}
              panels={driftPanels({ name, drift, series: series.data, temperature: temperature.data, phases, shown })}
              from={from}
              to={to}
              zone={campaign.timeZone}
              phases={phases}
              closeGaps={!view.openGaps && phases.length > 0}
              onWindow={(a, b) => (whole && a === whole.from && b === whole.to ? onWhole() : onWindow(a, b))}
              whole={view.window ? whole : undefined}
              onOpen={openRepeat}
              sentence={drift.used ? `From ${drift.used}.` : undefined}
            />
          ) : (
            !asked.error && (asked.isPending ? <Loading label="the drift" height={430} /> : <Empty>No phase in {name} has a value yet.</Empty>)
          )}
        </div>
      </Section>
      {drift?.slopePerDay != null && (
        <>
          <Section head="Slopes" note="Generalised least squares is the one to quote; the others hold under white noise only."><SlopeTable drift={drift} shown={shown} /></Section>
          <Section head="Steps" note="By penalised least squares under noise of unknown kind; a step must last three phases."><StepTable drift={drift} shown={shown} zone={campaign.timeZone} now={campaign.now} /></Section>
          <Section head="Trend and ageing"><AgeingAndTrend drift={drift} shown={shown} /></Section>
        </>
      )}
    </>
  );
}

function DriftSentence({ drift, name, scale, unit, isF0 }: { drift: DriftAnswer; name: string; scale: number; unit?: string; isF0: boolean }) {
  const { slopePerDay, u, lower, upper, ppmPerDay, n, steps } = drift;
  if (slopePerDay === null || u === null || lower === null || upper === null) return <>No drift can be told yet: {drift.used}.</>;
  const sure = lower > 0 || upper < 0;
  const size = `${formatUncertain(slopePerDay * scale, u * scale, { signed: true })}${unit ? `\u00a0${unit}` : ""} a day`;
  const relative = isF0 && ppmPerDay !== null ? `, ${formatNumber(Number(ppmPerDay.toPrecision(3)), { signed: true })}\u00a0ppm` : "";
  const stepWords = steps.length > 0 ? ` ${formatCount(steps.length)} ${steps.length === 1 ? "step stands" : "steps stand"} out.` : "";
  return sure ? <>In {name} the sensor drifts by {size}{relative}, over {formatCount(n)} phases.{stepWords}</> : <>In {name} no drift can be told from noise: {size}{relative}, over {formatCount(n)} phases.{stepWords}</>;
}
