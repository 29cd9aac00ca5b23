"use client";

import { useMemo } from "react";
import { MarkerSample } from "@/components/charts/pens";
import { SweepChart } from "@/components/charts/sweep-chart";
import { XyChart, type XySeries } from "@/components/charts/xy-chart";
import { Head, Section } from "@/components/ui/page";
import { F0 } from "@/components/ui/quantity";
import { Empty } from "@/components/ui/states";
import type { SweepAnswer } from "@/lib/readings/schema";
import { halfPowerPoints, resonanceArc, sweepViews, unitFor, type SweepViews } from "./sweep-views";

type SweepAndFitProps = { sweep: SweepAnswer; code: string; name: string };

/** Amplitude, phase and residuals on one x, and the complex plane beside them. */
export function SweepAndFit({ sweep, code, name }: SweepAndFitProps) {
  const { curve, parameters = [], f0Hz, q, readout, form, index } = sweep;
  const views = useMemo(() => (curve ? sweepViews(curve, parameters) : {}), [curve, parameters]);
  const file = `${code}-sweep-${sweep.sequence}-${index}`;
  if (!curve) {
    return (
      <Section head="Sweep and fit">
        <Empty>{form === "ringDown" ? "This repeat is a ring-down record; it has no sweep." : "This repeat was fitted on the rig; no sweep of it is kept."}</Empty>
      </Section>
    );
  }
  const { phase, residuals, plane } = views;
  const [unit, scale] = unitFor([...(residuals?.inPhase ?? []), ...(residuals?.quadrature ?? [])]);
  const fitted = curve.fittedV.length > 0;
  return (
    <Section
      head="Sweep and fit"
      note={fitted ? `Points as measured, line the fitted oscillator with offset and slope. Residuals${residuals?.quadrature ? " in phase (dots) and quadrature (rings)" : ""}. Arrow keys step through the points.` : "Nothing could be fitted; the points are as measured."}
      legend={
        <>
          <span><MarkerSample pen="points" hollow /> measured</span>
          {fitted && <span><MarkerSample pen="ink" line /> fit</span>}
          {fitted && <span><svg width="20" height="12" aria-hidden="true"><path d="M0 6H20" stroke="var(--ink3)" strokeDasharray="2 2" /></svg> <F0 /> and half power</span>}
        </>
      }
    >
      <div className="split">
        <SweepChart
          label={`Sweep of repeat ${index + 1}, ${name}, ${code}`}
          file={file}
          frequencyHz={curve.frequencyHz}
          panels={[
            { quantity: { words: "amplitude", unit: "V" }, measured: curve.measuredV, ...(fitted && { model: curve.fittedV }) },
            ...(phase ? [{ quantity: { words: "phase", unit: "°" }, measured: phase.measured, model: phase.fitted }] : []),
          ]}
          residuals={
            residuals && {
              quantity: { words: "residual", unit },
              inPhase: residuals.inPhase.map((volts) => volts * scale),
              ...(residuals.quadrature && { quadrature: residuals.quadrature.map((volts) => volts * scale) }),
            }
          }
          f0Hz={f0Hz ?? undefined}
          q={q ?? undefined}
        />
        {plane && (
          <div>
            <Head remark="offset and its slope taken off">Complex plane</Head>
            <XyChart
              label={`Complex plane of repeat ${index + 1}, ${name}, ${code}`}
              file={`${file}-plane`}
              x={{ words: "in phase", unit: "V" }}
              y={{ words: "quadrature", unit: "V" }}
              series={planeSeries(plane, readout === "velocity" && phase ? { marks: halfPowerPoints(parameters), arc: resonanceArc(parameters, phase.fitted) } : { marks: [] })}
              equal
            />
          </div>
        )}
      </div>
    </Section>
  );
}

type Drawn = { marks: ReturnType<typeof halfPowerPoints>; arc?: ReturnType<typeof resonanceArc> };

function planeSeries({ measured, fitted }: NonNullable<SweepViews["plane"]>, { marks, arc }: Drawn): XySeries[] {
  return [
    { id: "measured", label: "measured", pen: "points", points: measured.re.map((x, i) => ({ x, y: measured.im[i] })) },
    { id: "fit", label: "fit", pen: "ink", line: arc ?? fitted.re.map((x, i) => ({ x, y: fitted.im[i] })) },
    { id: "marks", label: "f₀ and half power", pen: "ink", points: marks.map(({ name, re, im }) => ({ x: re, y: im, hollow: true, name })) },
  ];
}
