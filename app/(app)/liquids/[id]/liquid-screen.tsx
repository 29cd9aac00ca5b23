"use client";

import { useInfiniteQuery, useQuery } from "@tanstack/react-query";
import { useMemo } from "react";
import { MarkerSample } from "@/components/charts/pens";
import { LinkButton } from "@/components/ui/button";
import { PageSentence, Section } from "@/components/ui/page";
import { PhaseChip } from "@/components/ui/phase-chip";
import { Quantity } from "@/components/ui/quantity";
import { Loading, Problem } from "@/components/ui/states";
import { formatNumber } from "@/lib/format";
import { liquidOptions, lotsOfLiquidOptions, usedInOptions } from "@/lib/liquids/client";
import { modelWords } from "@/lib/liquids/model-words";
import type { LiquidAnswer, LotAnswer } from "@/lib/liquids/schema";
import { may, type Role } from "@/lib/permissions";
import { HazardWords } from "./hazard-words";
import { LotsTable } from "./lots-table";
import { lotMark, PropertyCharts } from "./property-charts";
import { UsedInTable } from "./used-in-table";
import { WhereLoaded } from "./where-loaded";

const NO_LOTS: readonly LotAnswer[] = [];
const NOT_OVER: readonly string[] = ["queued", "running", "held"];

type LiquidScreenProps = { liquidId: string; role: Role; zone: string; now: string };

export function LiquidScreen({ liquidId, role, zone, now }: LiquidScreenProps) {
  const { data: liquid, error, refetch } = useQuery(liquidOptions(liquidId));
  const lots = useQuery(lotsOfLiquidOptions(liquidId)).data?.items ?? NO_LOTS;
  const usedIn = useInfiniteQuery(usedInOptions(liquidId)).data;
  const setPointsC = useMemo(() => [...new Set(usedIn?.pages.flatMap(({ items }) => items.filter(({ state }) => NOT_OVER.includes(state)).flatMap((used) => used.setPointsC)))], [usedIn]);
  if (!liquid) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the liquid" height={240} />}</Section>;

  const mayEdit = may(role, "edit liquids");
  return (
    <>
      <PageSentence
        margin={
          <>
            <span className="flex items-center gap-2"><PhaseChip kind="liquid" letter={liquid.letter} tint={liquid.tint} /><b className="text-ink">Letter {liquid.letter}</b></span>
            {modelWords(liquid)}
            {liquid.retiredAt && <div>retired</div>}
          </>
        }
        actions={
          mayEdit && (
            <>
              {!liquid.retiredAt && <LinkButton look="primary" href={`/liquids/${liquidId}/lots/new`}>New lot</LinkButton>}
              <LinkButton href={`/liquids/${liquidId}/edit`}>Edit</LinkButton>
            </>
          )
        }
      >
        <Properties liquid={liquid} />
      </PageSentence>
      {error && <Problem error={error} onRetry={() => void refetch()} />}
      <Section
        head="Properties"
        note={liquid.range.uDensityKgM3 === null ? "Line: the model in use, a table that states no uncertainty. Marks: certificates, k = 2. Outside the range nothing is said." : "Line: the model in use. Band: its 95 % uncertainty. Marks: certificates, k = 2. Outside the range nothing is said."}
        legend={<Legend lots={lots} hasSetPoints={setPointsC.length > 0} />}
      >
        <PropertyCharts liquid={liquid} lots={lots} setPointsC={setPointsC} />
      </Section>
      <Section head="Lots" note="One delivered bottle each.">
        <LotsTable liquid={liquid} mayEdit={mayEdit} zone={zone} now={now} />
      </Section>
      <Section head="Hazards" note="The label is on the bottle; here it stands in words. Statements: UN GHS Rev. 10, annex 3.">
        <div className="two">
          <HazardWords hazards={liquid.hazards} />
          <div>
            <h3 className="mb-3 font-semibold">Where it is loaded</h3>
            <WhereLoaded liquid={liquid} lots={lots} />
          </div>
        </div>
      </Section>
      <Section head="Used in">
        <UsedInTable liquidId={liquidId} name={liquid.name} />
      </Section>
    </>
  );
}

/** Density and viscosity at 20 °C, with the model's uncertainty where it has one, and how far the model reaches. */
function Properties({ liquid: { name, at20C, range } }: { liquid: LiquidAnswer }) {
  const reach = `known from ${formatNumber(range.minC)} to ${formatNumber(range.maxC)}\u00a0°C`;
  if (!at20C) return <>{name} is {reach}.</>;
  const { densityKgM3, viscosityMPaS } = at20C;
  const uViscosity = range.uViscosityPercent === null ? null : (viscosityMPaS * range.uViscosityPercent) / 100;
  return (
    <>
      {name} is <b><Quantity value={densityKgM3} u={range.uDensityKgM3} unit="kg/m³" decimals={2} /></b> and{" "}
      <b><Quantity value={viscosityMPaS} u={uViscosity} unit="mPa·s" decimals={3} /></b> at 20&nbsp;°C, {reach}.
    </>
  );
}

function Legend({ lots, hasSetPoints }: { lots: readonly LotAnswer[]; hasSetPoints: boolean }) {
  return (
    <>
      {lots.filter(({ certificate }) => certificate.length > 0).map(({ id, code }, place) => <span key={id}><MarkerSample {...lotMark(place)} />{code}</span>)}
      {hasSetPoints && <span><svg width="20" height="12" aria-hidden="true"><path d="M10 11V2M6.5 5.5L10 2L13.5 5.5" fill="none" stroke="var(--ink)" strokeWidth="1.6" /></svg>set-point in use</span>}
    </>
  );
}
