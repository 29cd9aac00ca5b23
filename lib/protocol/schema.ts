import { z } from "zod";
import { blockSchema, type ParsedBlock } from "./block-schema";
import { complete } from "./complete";
import { issueWords } from "./issue-words";
import { limitSchema } from "./limit-schema";
import { checkStructure } from "./structure";
import { searchSchema, type sweepSchema } from "./sweep-schema";

const fieldsSchema = z.strictObject({
  name: z.string().trim().min(1, "A protocol needs a name").max(200),
  readout: z.enum(["velocity", "displacement"]),
  blocks: z.array(blockSchema).min(1, "A protocol needs at least one block"),
  limits: z.array(limitSchema).max(200).default([]),
  baseline: z
    .strictObject({ airReferences: z.number().int().min(1).max(20).default(3) })
    .default({ airReferences: 3 }),
  park: z.array(blockSchema).optional(),
  parkAfterS: z.number().min(0).max(366 * 86_400).optional(),
  cleaning: z.array(blockSchema).optional(),
  maxAttempts: z.number().int().min(1).max(100).default(3),
  search: searchSchema.optional(),
});

/** Parsed, defaults in, ids perhaps still absent. */
export type ParsedDefinition = z.output<typeof fieldsSchema>;

/** The written procedure, as the editor and the API hand it in; ids that are absent are made by `parseDefinition`. */
export const definitionSchema = fieldsSchema.superRefine(checkStructure).meta({ id: "Definition" });

export type DefinitionInput = z.input<typeof definitionSchema>;

type Identified<T> = Omit<T, "id"> & { id: string };
type Parsed<Kind extends ParsedBlock["kind"]> = Identified<Extract<ParsedBlock, { kind: Kind }>>;
interface HoldsBlocks {
  blocks: Block[];
}
type Container<Kind extends ParsedBlock["kind"]> = Omit<Parsed<Kind>, "blocks" | "measure"> & HoldsBlocks;

export type Sweep = z.output<typeof sweepSchema>;
export type MeasureRole = "reference" | "check" | "sample";
export type MeasureBlock = Parsed<"measure"> & { role: MeasureRole };
export type FillBlock = Parsed<"fill">;
export type DrainBlock = Parsed<"drain">;
export type RinseBlock = Parsed<"rinse">;
export type DryBlock = Parsed<"dry">;
export type SettleBlock = Parsed<"settle">;
export type WaitBlock = Parsed<"wait">;
export type AskBlock = Parsed<"ask">;
export type RepeatBlock = Container<"repeat">;
export type UntilCleanBlock = Container<"untilClean"> & { measure: MeasureBlock };
export type ForEachBlock = Container<"forEach">;

export type LeafBlock =
  | MeasureBlock
  | FillBlock
  | DrainBlock
  | RinseBlock
  | DryBlock
  | SettleBlock
  | WaitBlock
  | AskBlock;
export type ContainerBlock = RepeatBlock | UntilCleanBlock | ForEachBlock;
export type Block = LeafBlock | ContainerBlock;

type ParsedLimit = z.output<typeof limitSchema>;
type LimitOf<T> = T extends unknown ? Identified<T> : never;
export type Limit = LimitOf<ParsedLimit>;
export type LimitAction = Limit["does"][number];

/** A definition as it is stored in a version: every id and every role is there. */
export type Definition = Omit<ParsedDefinition, "blocks" | "limits" | "park" | "cleaning"> & {
  blocks: Block[];
  limits: Limit[];
  park?: Block[];
  cleaning?: Block[];
};

export type DefinitionError = { path: string; message: string };

/**
 * Checks a definition that came from outside and makes what it left out. `makeId` gives a new id each time; one that is
 * already taken is asked for again. The paths are dotted, `blocks.2.sweep.points`.
 */
export function parseDefinition(
  input: unknown,
  makeId: () => string,
): { ok: true; definition: Definition } | { ok: false; errors: DefinitionError[] } {
  if (nestedTooDeep(input)) return { ok: false, errors: [{ path: "blocks", message: "Blocks are nested too deep" }] };
  const parsed = definitionSchema.safeParse(input, { error: issueWords });
  if (parsed.success) return { ok: true, definition: complete(parsed.data, makeId) };
  const errors = parsed.error.issues.map(({ path, message }) => ({ path: path.map(String).join("."), message }));
  return { ok: false, errors };
}

/** Guards the recursive schema against input made to exhaust the stack; the exact bound on nesting is a rule of `checkStructure`. */
function nestedTooDeep(input: unknown): boolean {
  let level: unknown[] = [input];
  for (let depth = 0; level.length > 0; depth++) {
    if (depth > 64) return true;
    level = level.flatMap((value) => (typeof value === "object" && value !== null ? Object.values(value) : []));
  }
  return false;
}
