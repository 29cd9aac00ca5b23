import { describe, expect, test } from "vitest";
import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import type { Json } from "@/lib/http/openapi-types";
import { rangeInWords, schemaFields, typeInWords } from "@/lib/http/schema-fields";

const json = (schema: z.ZodType) => z.toJSONSchema(schema, { io: "input" }) as Json;

describe("a type in words", () => {
  test.each([
    [z.string(), "text"],
    [z.iso.datetime(), "time"],
    [idSchema, "id"],
    [z.int(), "whole number"],
    [z.number(), "number"],
    [z.boolean(), "true or false"],
    [z.enum(["a", "b"]), '"a" or "b"'],
    [z.literal(3), "3"],
    [z.number().nullable(), "number or null"],
    [z.array(z.string()), "list of text"],
    [z.tuple([z.int(), z.int()]), "list of 2"],
    [z.union([z.literal(1), z.literal(1), z.string()]), "1 or text"],
    [z.unknown(), "anything"],
  ])("%#", (schema, words) => expect(typeInWords(json(schema))).toBe(words));
});

describe("a range in words", () => {
  test.each([
    [z.int().min(1).max(99), "1 to 99"],
    [z.number().positive(), "above 0"],
    [idSchema, ""],
    [z.number().min(-5), "at least -5"],
    [z.number().gt(0).lt(1), "above 0 and below 1"],
    [z.int(), ""],
    [z.string().min(12).max(200), "12 to 200 characters"],
    [z.string().max(20), "at most 20 characters"],
    [z.array(z.int()).min(2).max(2), "2 of them"],
    [z.int().min(1).default(50), "at least 1, 50 unless given"],
  ])("%#", (schema, words) => expect(rangeInWords(json(schema))).toBe(words));
});

const lines = (schema: z.ZodType) => schemaFields(json(schema)).map(({ name, depth, type, required }) => `${"  ".repeat(depth)}${name}: ${type}${required ? " !" : ""}`);

test("nested objects and lists of objects come under their field", () => {
  expect(lines(z.object({ a: z.string(), b: z.object({ c: z.int().optional() }), d: z.array(z.object({ e: z.boolean() })).optional() }))).toEqual([
    "a: text !",
    "b: object !",
    "  c: whole number",
    "d: list of object",
    "  e: true or false !",
  ]);
});

test("a default makes a field optional", () => expect(lines(z.object({ a: z.int().default(1) }))).toEqual(["a: whole number"]));

test("names that are free are said to be", () => {
  expect(lines(z.object({ slots: z.record(z.string(), z.object({ port: z.int() })) }))).toEqual(["slots: object !", "  any name: object", "    port: whole number !"]);
});

test("of alternatives the common part is said once", () => {
  const schema = z.union([z.object({ lease: z.string(), outcome: z.literal("done") }), z.object({ lease: z.string(), outcome: z.literal("failed"), code: z.string() })]);
  expect(lines(schema)).toEqual(["lease: text !", "either: ", 'outcome: "done" !', "or: ", 'outcome: "failed" !', "code: text !"]);
});

test("a schema of the document is named and not repeated, so that recursion ends", () => {
  const node: Json = { type: "object", required: ["blocks"], properties: { blocks: { type: "array", items: { $ref: "#/components/schemas/Block" } } } };
  expect(schemaFields(node)).toEqual([{ name: "blocks", depth: 0, type: "list of Block", range: "", required: true, note: undefined, ref: "Block" }]);
});
