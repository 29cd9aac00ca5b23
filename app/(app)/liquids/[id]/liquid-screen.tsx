"use client";

import { useQuery } from "@tanstack/react-query";
import { LinkButton } from "@/components/ui/button";
import { PageSentence, Section } from "@/components/ui/page";
import { PhaseChip } from "@/components/ui/phase-chip";
import { Quantity } from "@/components/ui/quantity";
import { Loading, Problem } from "@/components/ui/states";
import { formatNumber } from "@/lib/format";
import { liquidOptions } from "@/lib/liquids/client";
import { modelWords } from "@/lib/liquids/model-words";
import type { LiquidAnswer } from "@/lib/liquids/schema";
import { may, type Role } from "@/lib/permissions";
import { HazardWords } from "./hazard-words";
import { LotsTable } from "./lots-table";

type LiquidScreenProps = { liquidId: string; role: Role; zone: string; now: string };

export function LiquidScreen({ liquidId, role, zone, now }: LiquidScreenProps) {
  const { data: liquid, error, refetch } = useQuery(liquidOptions(liquidId));
  if (!liquid) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the liquid" height={240} />}</Section>;

  const mayEdit = may(role, "edit liquids");
  return (
    <>
      <PageSentence
        margin={
          <>
            <span className="flex items-center gap-2"><PhaseChip kind="liquid" letter={liquid.letter} tint={liquid.tint} /><b className="text-ink">Letter {liquid.letter}</b></span>
            {modelWords(liquid)}
          </>
        }
        actions={mayEdit && <LinkButton look="primary" href={`/liquids/${liquidId}/lots/new`}>New lot</LinkButton>}
      >
        <Properties liquid={liquid} />
      </PageSentence>
      {error && <Problem error={error} onRetry={() => void refetch()} />}
      <Section head="Lots" note="One delivered bottle each.">
        <LotsTable liquid={liquid} mayEdit={mayEdit} zone={zone} now={now} />
      </Section>
      <Section head="Hazards" note="The label is on the bottle; here it stands in words. Statements: UN GHS Rev. 10, annex 3.">
        <HazardWords hazards={liquid.hazards} />
      </Section>
    </>
  );
}

/** Density and viscosity at 20 °C, with the model's uncertainty where it has one, and how far the model reaches. */
function Properties({ liquid: { name, at20C, range } }: { liquid: LiquidAnswer }) {
  const reach = `known from ${formatNumber(range.minC)} to ${formatNumber(range.maxC)} °C`;
  if (!at20C) return <>{name} is {reach}.</>;
  const { densityKgM3, viscosityMPaS } = at20C;
  const uViscosity = range.uViscosityPercent === null ? null : (viscosityMPaS * range.uViscosityPercent) / 100;
  return (
    <>
      {name} is <b><Quantity value={densityKgM3} u={range.uDensityKgM3} unit="kg/m³" decimals={2} /></b> and{" "}
      <b><Quantity value={viscosityMPaS} u={uViscosity} unit="mPa·s" decimals={3} /></b> at 20 °C, {reach}.
    </>
  );
}
