import { OpenApiGeneratorV31, OpenAPIRegistry } from "@asteasolutions/zod-to-openapi";
import { expect, test } from "vitest";
import { z } from "zod";
import { definitionSchema } from "@/lib/protocol/schema";

test("the recursive definition can be published as OpenAPI, blocks referring to blocks by name", () => {
  const registry = new OpenAPIRegistry();
  registry.registerPath({
    method: "post",
    path: "/api/protocols",
    request: { body: { content: { "application/json": { schema: z.object({ definition: definitionSchema }) } } } },
    responses: { 201: { description: "Made" } },
  });
  const { components } = new OpenApiGeneratorV31(registry.definitions).generateComponents();
  const text = JSON.stringify(components?.schemas);

  expect(Object.keys(components?.schemas ?? {})).toEqual(expect.arrayContaining(["Block", "Definition", "Limit"]));
  expect(text).toContain('"items":{"$ref":"#/components/schemas/Block"}');
});
