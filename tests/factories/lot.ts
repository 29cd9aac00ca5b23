import type { CreationAttributes } from "sequelize";
import { Lot } from "@/models/lot";
import { buildLiquid } from "./liquid";
import { next, now } from "./now";

export async function buildLot(given: Partial<CreationAttributes<Lot>> = {}): Promise<Lot> {
  const liquidId = given.liquidId ?? (await buildLiquid()).id;
  return Lot.create({ code: `LT-${next()}`, receivedAt: now, createdAt: now, ...given, liquidId });
}
