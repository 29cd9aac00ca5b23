import { row } from "@/lib/db";
import type { Actor } from "@/lib/people/actor";
import { createLiquid, type Hazards } from "@/lib/liquids/create";
import { recordLot } from "@/lib/liquids/record-lot";
import { loadScenario } from "@/rig-simulator/load-scenario";
import type { CertificateRow, PropertyRow } from "@/models/json";
import { before } from "./anchor";

type DemoLiquid = { name: string; letter: string; model: "water" | "2-propanol" | "table"; table?: PropertyRow[]; hazards?: Hazards };

/** The simulated rigs' own tables: what the bottles really hold. */
function tableOf(scenario: string, name: string): PropertyRow[] {
  const liquid = loadScenario(scenario).rig.ports.find((port) => port.name === name)?.liquid;
  if (liquid?.model !== "table") throw new Error(`the scenario ${scenario} has no table of ${name}`);
  return liquid.table;
}

const solvents = "Solvents, halogen-free";

const liquids = (): DemoLiquid[] => [
  { name: "Water", letter: "W", model: "water", hazards: { waste: "Aqueous" } },
  {
    name: "2-Propanol",
    letter: "P",
    model: "2-propanol",
    hazards: { ghs: ["H225", "H319", "H336"], flashPointC: 12, waste: solvents },
  },
  { name: "Calder 12", letter: "K", model: "table", table: tableOf("north-bench", "Calder 12"), hazards: { ghs: ["H315"], flashPointC: 96, waste: solvents } },
  {
    name: "Brine B-35",
    letter: "B",
    model: "table",
    table: tableOf("south-bench", "Brine B-35"),
    hazards: { waste: "Aqueous", notWith: ["2-Propanol"] },
  },
  { name: "Tarn mix 3", letter: "T", model: "table", table: tableOf("cold-room", "Tarn mix 3"), hazards: { ghs: ["H226"], flashPointC: 36, waste: solvents } },
];

const water: CertificateRow[] = [
  { temperatureC: 15, densityKgM3: 999.1, uDensityKgM3: 0.02 },
  { temperatureC: 20, densityKgM3: 998.2, uDensityKgM3: 0.02 },
  { temperatureC: 25, densityKgM3: 997.05, uDensityKgM3: 0.02 },
];

const lots: { liquid: string; code: string; lastsDays: number; certificate: CertificateRow[] }[] = [
  { liquid: "Water", code: "WA-0512", lastsDays: 180, certificate: water },
  { liquid: "2-Propanol", code: "IP-0447", lastsDays: 700, certificate: [{ temperatureC: 20, densityKgM3: 785.1, uDensityKgM3: 0.1 }] },
  {
    liquid: "Calder 12",
    code: "CA-12-0388",
    lastsDays: 240,
    certificate: [
      { temperatureC: 15, densityKgM3: 865.31, uDensityKgM3: 0.06, viscosityMPaS: 4.522, uViscosityMPaS: 0.011 },
      { temperatureC: 20, densityKgM3: 861.88, uDensityKgM3: 0.06, viscosityMPaS: 3.881, uViscosityMPaS: 0.01 },
      { temperatureC: 25, densityKgM3: 858.41, uDensityKgM3: 0.06, viscosityMPaS: 3.362, uViscosityMPaS: 0.009 },
    ],
  },
  {
    liquid: "Calder 12",
    code: "CA-12-0391",
    lastsDays: 420,
    certificate: [{ temperatureC: 20, densityKgM3: 861.95, uDensityKgM3: 0.06, viscosityMPaS: 3.887, uViscosityMPaS: 0.01 }],
  },
  { liquid: "Brine B-35", code: "B35-0102", lastsDays: 365, certificate: [{ temperatureC: 20, densityKgM3: 1025.72, uDensityKgM3: 0.05 }] },
  {
    liquid: "Tarn mix 3",
    code: "T3-0077",
    lastsDays: 300,
    certificate: [{ temperatureC: 5, densityKgM3: 972.2, uDensityKgM3: 0.08, viscosityMPaS: 4.41, uViscosityMPaS: 0.02 }],
  },
];

/** Ids of lots by their code. */
export type Lots = Record<string, string>;

const DAY_MS = 86_400_000;

export async function seedLiquids({ by, now }: { by: Actor; now: Date }): Promise<Lots> {
  for (const liquid of liquids()) {
    if (!(await row(`select id from liquid where name = $1`, [liquid.name]))) await createLiquid({ ...liquid, by, now });
  }
  const ids: Lots = {};
  for (const { liquid, code, lastsDays, certificate } of lots) {
    const found = await row<{ id: string; lotId: string | null }>(
      `select q.id, lot.id as "lotId" from liquid q left join lot on lot.liquid_id = q.id and lot.code = $2 where q.name = $1`,
      [liquid, code],
    );
    if (!found) throw new Error(`the liquid ${liquid} was not made`);
    const expiresAt = new Date(now.getTime() + lastsDays * DAY_MS);
    ids[code] = found.lotId ?? (await recordLot({ by, now, liquidId: found.id, code, receivedAt: before(now, 4 * 1440), expiresAt, certificate })).id;
  }
  return ids;
}
