import { expect, test } from "vitest";
import { z } from "zod";
import { definitionSchema } from "@/lib/protocol/schema";

test("the recursive definition can be published as JSON Schema, blocks referring to blocks by name", () => {
  const schema = z.toJSONSchema(z.object({ definition: definitionSchema }), { io: "input" });
  expect(Object.keys(schema.$defs ?? {})).toEqual(expect.arrayContaining(["Block", "Definition", "Limit"]));
  expect(JSON.stringify(schema)).toContain('"items":{"$ref":"#/$defs/Block"}');
});
