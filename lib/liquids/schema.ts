import { z } from "zod";
import { campaignState } from "@/lib/campaigns/schema";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { idSchema } from "@/lib/http/ids";
import { instant, time, words } from "@/lib/schema";

export const LIQUID_MODELS = ["water", "ethanol", "2-propanol", "ethanol-water", "2-propanol-water", "glycerol-water", "table"] as const;
const MIXTURES: readonly string[] = ["ethanol-water", "2-propanol-water", "glycerol-water"];

const temperatureC = z.number().min(-100).max(400);
const densityKgM3 = z.number().positive().max(25_000);
const viscosityMPaS = z.number().positive().max(1e7);
const ghsCode = z.string().regex(/^H[2-4]\d{2}[A-Za-z]{0,2}$/, "is no hazard statement, such as H225");

const propertyTable = z
  .array(z.strictObject({ temperatureC, densityKgM3, viscosityMPaS }))
  .min(2, "needs at least two temperatures")
  .max(500)
  .superRefine((table, context) => {
    for (let row = 1; row < table.length; row++)
      if (table[row].temperatureC <= table[row - 1].temperatureC)
        context.addIssue({ code: "custom", path: [row, "temperatureC"], message: "must be above the temperature of the row before" });
  });

export const hazards = z.strictObject({
  ghs: z.array(ghsCode).max(40).default([]),
  flashPointC: z.number().min(-150).max(500).optional(),
  waste: words(200).optional(),
  notWith: z.array(words(200)).max(50).default([]),
});

const letter = z.string().regex(/^[A-Z][A-Z0-9]?$/, "is one capital letter, or a letter and a digit or second letter");

const liquidFields = z.strictObject({
  name: words(200),
  letter: letter.optional(),
  model: z.enum(LIQUID_MODELS),
  massFraction: z.number().min(0).max(1).optional().describe("Of the first-named substance; mixtures only"),
  table: propertyTable.optional(),
  hazards: hazards.optional(),
});

type Modelled = { model: string; massFraction?: number; table?: unknown };

export const liquidBody = liquidFields.superRefine(({ model, massFraction, table }: Modelled, context) => {
  const wrong = (path: string, message: string) => context.addIssue({ code: "custom", path: [path], message });
  const isMixture = MIXTURES.includes(model);
  if (isMixture && massFraction === undefined) wrong("massFraction", `a ${model} mixture needs the mass fraction of its first-named substance`);
  if (!isMixture && massFraction !== undefined) wrong("massFraction", "belongs to mixtures only");
  if (model === "table" && table === undefined) wrong("table", "the model table needs its table");
  if (model !== "table" && table !== undefined) wrong("table", "belongs to the model table only");
});

/** Properties stay what campaigns were analysed with: another model is another liquid. */
export const liquidChange = z.strictObject({
  name: words(200).optional(),
  letter: letter.optional(),
  hazards: hazards.optional(),
  retired: z.boolean().optional(),
});

export const liquidQuery = pageQuery.extend({ retired: z.enum(["true", "false"]).default("false"), search: z.string().max(100).optional() });

const certificate = z
  .array(
    z
      .strictObject({
        temperatureC,
        densityKgM3,
        uDensityKgM3: z.number().positive().max(1000),
        viscosityMPaS: viscosityMPaS.optional(),
        uViscosityMPaS: z.number().positive().max(1e6).optional(),
      })
      .refine(({ viscosityMPaS: value, uViscosityMPaS: u }) => (value === undefined) === (u === undefined), {
        path: ["uViscosityMPaS"],
        error: "a viscosity and its uncertainty come together",
      }),
  )
  .max(200)
  .superRefine((points, context) => {
    const seen = new Set<number>();
    for (const [index, point] of points.entries()) {
      if (seen.has(point.temperatureC)) context.addIssue({ code: "custom", path: [index, "temperatureC"], message: "stands twice" });
      seen.add(point.temperatureC);
    }
  });

const inOrder = ({ receivedAt, expiresAt }: { receivedAt?: Date | null; expiresAt?: Date | null }) => !receivedAt || !expiresAt || receivedAt < expiresAt;
const orderMessage = { path: ["expiresAt"], error: "must lie after the day it was received" };

export const lotBody = z
  .strictObject({ code: words(100), receivedAt: instant.optional(), expiresAt: instant.optional(), certificate: certificate.default([]) })
  .refine(inOrder, orderMessage);

export const lotChange = z.strictObject({
  receivedAt: instant.nullable().optional(),
  expiresAt: instant.nullable().optional(),
  certificate: certificate.optional(),
});

export const lotQuery = pageQuery.extend({ liquidId: idSchema.optional(), search: z.string().max(100).optional() });

export const lotAnswer = z.object({
  id: z.string(),
  liquidId: z.string(),
  liquidName: z.string(),
  letter: z.string(),
  code: z.string(),
  receivedAt: time.nullable(),
  expiresAt: time.nullable(),
  certificate: z.array(
    z.object({
      temperatureC: z.number(),
      densityKgM3: z.number(),
      uDensityKgM3: z.number(),
      viscosityMPaS: z.number().optional(),
      uViscosityMPaS: z.number().optional(),
    }),
  ),
  /** Ports that a bottle of this lot stands on. */
  ports: z.array(z.object({ rigId: z.string(), rigName: z.string(), port: z.int(), remainingMl: z.number(), fullMl: z.number() })),
  campaigns: z.int(),
  createdAt: time,
});

export const lotPage = pageOf(lotAnswer);

export const liquidAnswer = z.object({
  id: z.string(),
  name: z.string(),
  letter: z.string(),
  model: z.enum(LIQUID_MODELS),
  massFraction: z.number().nullable(),
  table: z.array(z.object({ temperatureC: z.number(), densityKgM3: z.number(), viscosityMPaS: z.number() })).nullable(),
  hazards: z.object({
    ghs: z.array(z.string()),
    statements: z.array(z.object({ code: z.string(), hazardClass: z.string().nullable(), text: z.string().nullable() })),
    flashPointC: z.number().nullable(),
    waste: z.string().nullable(),
    notWith: z.array(z.string()),
  }),
  tint: z.union([z.literal(1), z.literal(2), z.literal(3)]),
  /** Density and viscosity at 20 °C; null where the model does not reach it. */
  at20C: z.object({ densityKgM3: z.number(), viscosityMPaS: z.number() }).nullable(),
  range: z.object({ minC: z.number(), maxC: z.number(), uDensityKgM3: z.number().nullable(), uViscosityPercent: z.number().nullable() }),
  lots: z.int(),
  loadedOn: z.int(),
  createdAt: time,
  retiredAt: time.nullable(),
});

/** A campaign that has a lot of the liquid bound to a slot. */
export const usedInAnswer = z.object({
  campaignId: z.string(),
  name: z.string(),
  state: campaignState,
  /** The screen's word. */
  word: z.string(),
  slot: z.string(),
  lotId: z.string(),
  lotCode: z.string(),
  fills: z.int(),
  usedMl: z.number(),
  /** Where it was measured; of a campaign that is not over also where it will be. */
  setPointsC: z.array(z.number()),
  /** Newest phase value in it. */
  f0: z.object({ mean: z.number(), u: z.number().nullable() }).nullable(),
});

export const usedInPage = pageOf(usedInAnswer);

export const liquidPage = pageOf(liquidAnswer);
export const liquidCreated = z.object({ id: z.string(), letter: z.string() });

export type LiquidAnswer = z.output<typeof liquidAnswer>;
export type LiquidQuery = z.output<typeof liquidQuery>;
export type UsedInAnswer = z.output<typeof usedInAnswer>;
export type LotAnswer = z.output<typeof lotAnswer>;
export type LotQuery = z.output<typeof lotQuery>;
