"use client";

import { XyChart, type XySeries } from "@/components/charts/xy-chart";
import { TimeSeriesChart } from "@/components/charts/time-series-chart";
import { Section } from "@/components/ui/page";
import { Empty, Loading, Problem } from "@/components/ui/states";
import type { DriftAnswer } from "@/lib/analysis/schema";
import { campaignCode } from "@/lib/campaigns/code";
import { formatNumber, formatUncertain } from "@/lib/format";
import { ProblemError } from "@/lib/http/fetch-json";
import { phasesOf } from "../repeats-data";
import { useView } from "../use-view";
import type { AnalysisProps } from "./analysis-screen";
import { MediaChoice, QuantityChoice, SetPointChoice, TypedChoices } from "./choices";
import { shownAs, type Shown } from "./drift-data";
import { Folded } from "./folded";
import { againstTemperature } from "./temperature-data";
import { useDrift } from "./use-drift";

/** The temperature coefficient with its plot, the cell's temperature in time, and what compensating would do. */
export function TemperatureTab(props: AnalysisProps) {
  const { campaign, view, set } = props;
  const { onWindow, onWhole } = useView();
  const measured = useDrift(props, "none");
  const { drift: asked } = useDrift(props, "temperature");
  const { name, setPointC, series, temperature } = measured;
  const code = campaignCode(campaign.id);
  const raw = measured.drift.data;
  const compensated = asked.error ? undefined : asked.data;
  const shown = shownAs(view.quantity, raw?.values ?? []);
  const refused = asked.error instanceof ProblemError && asked.error.status === 422;
  const phases = series.data ? phasesOf(series.data, () => undefined) : [];
  const [from, to] = [view.window?.from ?? phases[0]?.from, view.window?.to ?? phases.at(-1)?.to];
  const plot = raw && compensated && againstTemperature(raw, compensated, shown);
  return (
    <>
      <Section
        head="Choose"
        note="Phase values with their drift taken off against the thermometer’s mean; coefficient and drift are fitted together, so that neither steals from the other."
        controls={
          <Folded sentence={`${view.quantity === "f0" ? "f₀" : "Q"} in ${name}`}>
            <QuantityChoice view={view} set={set} />
            <MediaChoice {...props} one />
            <SetPointChoice {...props} chosen={setPointC} />
            <TypedChoices view={view} set={set} />
          </Folded>
        }
      >
        <div aria-busy={asked.isFetching}>
          {asked.error && !refused && <Problem error={asked.error} onRetry={() => void asked.refetch()} />}
          {refused && <Empty>{asked.error?.message}</Empty>}
          {compensated && <p className="say mb-4">{coefficientWords(compensated, name, shown)}</p>}
          {plot ? (
            <XyChart
              label={`Phase values of ${code} in ${name} less drift, against temperature`}
              file={`${code}-temperature-${view.quantity}`}
              x={{ words: "cell", less: `${formatNumber(plot.referenceC, { decimals: 3 })}\u00a0°C`, unit: "mK" }}
              y={{ symbol: shown.symbol, sub: shown.sub, less: "drift", unit: shown.unit }}
              series={plot.series as XySeries[]}
              height={260}
              zero
              sentence={effectWords(raw, compensated, shown)}
            />
          ) : (
            !asked.error && <Loading label="the temperature coefficient" height={320} />
          )}
        </div>
      </Section>
      <Section head="Cell temperature" note="All repeats: lowest, highest and mean of each column.">
        {temperature.data && temperature.data.buckets.length > 0 && from && to && Date.parse(to) > Date.parse(from) ? (
          <TimeSeriesChart
            label={`Cell temperature of ${code} in ${name}`}
            file={`${code}-cell-temperature`}
            panels={[{ id: "temperature", quantity: { words: "cell", unit: "°C" }, series: [{ id: "temperature", label: name, pen: "points", buckets: temperature.data.buckets }], height: 130 }]}
            from={from}
            to={to}
            zone={campaign.timeZone}
            phases={phases}
            closeGaps={!view.openGaps}
            onWindow={onWindow}
            whole={view.window && phases.length > 0 ? { from: phases[0].from, to: phases[phases.length - 1].to } : undefined}
          />
        ) : temperature.isPending ? (
          <Loading label="the cell temperature" height={160} />
        ) : (
          <Empty>No temperature was reported with these repeats.</Empty>
        )}
        {view.window && <div className="buttons mt-2"><button type="button" className="button link" onClick={onWhole}>Whole run</button></div>}
      </Section>
    </>
  );
}

function coefficientWords({ compensation }: DriftAnswer, name: string, { scale, unit }: Shown): string {
  const linear = compensation?.terms.find((term) => term.name === "linear");
  const curved = compensation?.terms.find((term) => term.name === "quadratic");
  if (!compensation || !linear) return "";
  const per = (power: string) => `\u00a0${unit ?? ""}${unit ? "/" : "per "}${power}`;
  const second = curved ? ` and ${formatUncertain(curved.value * scale, curved.u * scale, { signed: true })}${per("K²")}` : "";
  if (Math.abs(linear.value) < 2 * linear.u) return `In ${name} no temperature coefficient can be told from noise: ${formatUncertain(linear.value * scale, linear.u * scale, { signed: true })}${per("K")}.`;
  return `In ${name} the temperature coefficient is ${formatUncertain(linear.value * scale, linear.u * scale, { signed: true })}${per("K")}${second}.`;
}

function effectWords(raw: DriftAnswer | undefined, { compensation, slopePerDay, u, values }: DriftAnswer, { scale, unit }: Shown): string {
  if (!raw || !compensation || slopePerDay === null || u === null || raw.slopePerDay === null || raw.u === null) return "";
  const common = values.reduce((most, value) => Math.max(most, value.commonU ?? 0), 0);
  const unitText = unit ? `\u00a0${unit}` : "";
  return (
    `${compensation.used.charAt(0).toUpperCase()}${compensation.used.slice(1)}. Drift as measured ${formatUncertain(raw.slopePerDay * scale, raw.u * scale, { signed: true })}${unitText} a day, ` +
    `compensated ${formatUncertain(slopePerDay * scale, u * scale, { signed: true })}. Compensating adds at most ${formatNumber(Number((common * scale).toPrecision(2)))}${unitText} of common uncertainty to a phase value.` +
    (compensation.attenuation !== null && compensation.attenuation > 0.01 ? ` The thermometer’s scatter makes the coefficient ${formatNumber(compensation.attenuation * 100, { decimals: 1 })}\u00a0% too small; its uncertainty holds that.` : "")
  );
}
