"use client";

import { useMemo } from "react";
import type { Pen } from "@/components/charts/pens";
import { XyChart, type XySeries } from "@/components/charts/xy-chart";
import { FLASH_POINT_MARGIN_C } from "@/lib/campaigns/cautions";
import { formatNumber } from "@/lib/format";
import { certificateDeviations, propertyCurves } from "@/lib/liquids/curve";
import type { LiquidAnswer, LotAnswer } from "@/lib/liquids/schema";

const LOT_PENS: readonly Pen[] = ["points", "third", "fourth"];
const SMALL_PX = 70;
/** A viscosity that spans more than this is drawn to a logarithmic scale. */
const WIDE_RATIO = 30;

type PropertyChartsProps = { liquid: LiquidAnswer; lots: readonly LotAnswer[]; /** Of campaigns that are not over. */ setPointsC: readonly number[] };

/** The pen of a lot and whether its marks are hollow: pens are three, so the fourth lot begins hollow. */
export const lotMark = (place: number): { pen: Pen; hollow: boolean } => ({ pen: LOT_PENS[place % LOT_PENS.length], hollow: place >= LOT_PENS.length });

/** Density and viscosity against temperature, certificate minus model under each, to one scale of temperature. */
export function PropertyCharts({ liquid, lots, setPointsC }: PropertyChartsProps) {
  const curves = useMemo(() => propertyCurves(liquid, liquid.range), [liquid]);
  const certified = useMemo(() => lots.filter(({ certificate }) => certificate.length > 0).map((lot, place) => ({ lot, ...lotMark(place), deviations: certificateDeviations(liquid, lot.certificate) })), [liquid, lots]);
  const { minC, maxC, uDensityKgM3, uViscosityPercent } = liquid.range;
  const flashC = liquid.hazards.flashPointC === null ? null : liquid.hazards.flashPointC - FLASH_POINT_MARGIN_C;
  const room = Math.max(2, (maxC - minC) * 0.08);
  const xRange: [number, number] = [minC - room, maxC + room];
  const shared = {
    x: { words: "temperature", unit: "°C" },
    xRange,
    outside: [[xRange[0], minC], [maxC, xRange[1]]] satisfies [number, number][],
    xLimits: flashC !== null && flashC > xRange[0] && flashC < xRange[1] ? [{ value: flashC, label: `${formatNumber(flashC)} °C, see Hazards` }] : [],
  };
  const marks = setPointsC.filter((value) => value >= xRange[0] && value <= xRange[1]).map((value) => ({ value, label: `Set-point ${formatNumber(value)} °C` }));
  const zero = (u: number | null): XySeries => ({ id: "model", label: "Model", pen: "ink", line: [minC, maxC].map((x) => ({ x, y: 0, ...(u === null ? {} : { low: -2 * u, high: 2 * u }) })) });
  const viscosities = curves.viscosity.map(({ y }) => y);
  const logY = Math.max(...viscosities) > WIDE_RATIO * Math.min(...viscosities);

  const density: XySeries[] = [
    { id: "model", label: "Model", pen: "ink", line: curves.density },
    ...certified.map(({ lot, pen, hollow }): XySeries => ({ id: lot.id, label: lot.code, pen, points: lot.certificate.map(({ temperatureC, densityKgM3, uDensityKgM3: u }) => ({ x: temperatureC, y: densityKgM3, u, hollow, name: lot.code })) })),
  ];
  const viscosity: XySeries[] = [
    { id: "model", label: "Model", pen: "ink", line: curves.viscosity },
    ...certified.map(({ lot, pen, hollow }): XySeries => ({
      id: lot.id,
      label: lot.code,
      pen,
      points: lot.certificate.flatMap(({ temperatureC, viscosityMPaS, uViscosityMPaS: u }) => (viscosityMPaS === undefined ? [] : [{ x: temperatureC, y: viscosityMPaS, u, hollow, name: lot.code }])),
    })),
  ];
  const deviations = (of: "density" | "viscosity") => certified.map(({ lot, pen, hollow, deviations: all }): XySeries => ({ id: lot.id, label: lot.code, pen, points: all[of].map((point) => ({ ...point, hollow, name: lot.code })) }));
  const densityDeviations = deviations("density");
  const viscosityDeviations = deviations("viscosity");
  const hasAny = (series: readonly XySeries[]) => series.some(({ points = [] }) => points.length > 0);

  return (
    <div className="two">
      <div>
        <h3 className="mb-1 font-semibold">Density</h3>
        <XyChart {...shared} label={`Density of ${liquid.name} against temperature`} file={`${liquid.name} density`} y={{ symbol: "ρ", unit: "kg/m³" }} series={density} xMarks={hasAny(densityDeviations) ? [] : marks} />
        {hasAny(densityDeviations) && (
          <XyChart {...shared} xLimits={[]} xMarks={marks} label="Density, certificate minus model" file={`${liquid.name} density, certificate minus model`} y={{ words: "certificate − model", unit: "kg/m³" }} series={[zero(uDensityKgM3), ...densityDeviations]} height={SMALL_PX} zero />
        )}
      </div>
      <div>
        <h3 className="mb-1 font-semibold">Viscosity</h3>
        <XyChart {...shared} label={`Viscosity of ${liquid.name} against temperature`} file={`${liquid.name} viscosity`} y={{ symbol: "η", unit: "mPa·s" }} series={viscosity} xMarks={hasAny(viscosityDeviations) ? [] : marks} logY={logY} />
        {hasAny(viscosityDeviations) && (
          <XyChart {...shared} xLimits={[]} xMarks={marks} label="Viscosity, certificate minus model" file={`${liquid.name} viscosity, certificate minus model`} y={{ words: "certificate − model", unit: "%" }} series={[zero(uViscosityPercent), ...viscosityDeviations]} height={SMALL_PX} zero />
        )}
      </div>
    </div>
  );
}
