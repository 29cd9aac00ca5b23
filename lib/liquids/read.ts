import type { Transaction } from "sequelize";
import { z } from "zod";
import { row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import { hazardStatement } from "@/lib/liquids/ghs";
import { propertiesAt, rangeOf, typicalViscosityMPaS } from "@/lib/liquids/property-model";
import type { LiquidAnswer, LiquidQuery } from "@/lib/liquids/schema";
import { tintOf } from "@/lib/liquids/tint";
import type { PropertyRow } from "@/models/json";

type LiquidRow = {
  id: string;
  name: string;
  letter: string;
  model: LiquidAnswer["model"];
  massFraction: number | null;
  table: PropertyRow[] | null;
  ghs: string[];
  flashPointC: number | null;
  waste: string | null;
  notWith: string[];
  lots: number;
  loadedOn: number;
  createdAt: Date;
  retiredAt: Date | null;
};

const SELECT = `
  select q.id, q.name, q.letter, q.model, q.mass_fraction as "massFraction", q.property_table as "table", q.ghs,
         q.flash_point_c as "flashPointC", q.waste, q.not_with as "notWith", q.created_at as "createdAt", q.retired_at as "retiredAt",
         (select count(*)::int from lot where lot.liquid_id = q.id) as lots,
         (select count(*)::int from port p join load l on l.id = p.load_id join lot on lot.id = l.lot_id where lot.liquid_id = q.id) as "loadedOn"
    from liquid q`;

/** @throws AppError 404 when there is none. */
export async function getLiquid(liquidId: string, transaction?: Transaction): Promise<LiquidAnswer> {
  const found = await row<LiquidRow>(`${SELECT} where q.id = $1`, [liquidId], transaction);
  if (!found) throw notFound("liquid");
  return presentLiquid(found);
}

/** Liquids by name, those in use or the retired ones. */
export async function findLiquids({ limit, cursor, retired, search }: LiquidQuery): Promise<Page<LiquidAnswer>> {
  const [name, id] = readCursor(cursor, z.tuple([z.string(), idSchema])) ?? [null, null];
  const found = await rows<LiquidRow>(
    `${SELECT} where (q.retired_at is not null) = $1 and ($2::text is null or (q.name, q.id) > ($2, $3::bigint))
       and ($4::text is null or position(lower($4) in lower(q.name)) > 0)
     order by q.name, q.id limit $5`,
    [retired === "true", name, id, search?.trim() || null, limit + 1],
  );
  const { items, nextCursor } = cutPage(found, limit, (liquid) => [liquid.name, liquid.id]);
  return { items: items.map(presentLiquid), nextCursor };
}

function presentLiquid({ ghs, flashPointC, waste, notWith, createdAt, retiredAt, ...liquid }: LiquidRow): LiquidAnswer {
  const { minC, maxC, uDensityKgM3 = null, uViscosityPercent = null } = rangeOf(liquid);
  return {
    ...liquid,
    hazards: {
      ghs,
      statements: ghs.map((code) => {
        const statement = hazardStatement(code);
        return { code, hazardClass: statement?.hazardClass ?? null, text: statement?.text ?? null };
      }),
      flashPointC,
      waste,
      notWith,
    },
    tint: tintOf(typicalViscosityMPaS(liquid)),
    at20C: propertiesAt(liquid, 20),
    range: { minC, maxC, uDensityKgM3, uViscosityPercent },
    createdAt: createdAt.toISOString(),
    retiredAt: retiredAt?.toISOString() ?? null,
  };
}
