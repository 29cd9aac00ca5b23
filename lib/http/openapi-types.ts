import type { ProblemCode } from "@/lib/problem-types";

/** What we write of OpenAPI 3.1; schemas are JSON Schema 2020-12. */
export type Json = Record<string, unknown>;

export type Parameter = { name: string; in: "path" | "query" | "header"; required: boolean; description?: string; schema: Json };

export type Media = { schema: Json; example?: unknown; examples?: Record<string, { summary: string; value: unknown }> };

export type DocumentedOperation = {
  operationId: string;
  summary: string;
  description?: string;
  tags: string[];
  /** A permission of `lib/permissions.ts`, "agent" or "public". */
  "x-access": string;
  "x-problems": ProblemCode[];
  security: Record<string, string[]>[];
  parameters?: Parameter[];
  requestBody?: { content: Record<string, Media> };
  responses: Record<string, { description: string; content?: Record<string, Media> }>;
};

export type OpenApiDocument = {
  openapi: string;
  info: { title: string; version: string; description: string };
  servers: { url: string }[];
  paths: Record<string, Record<string, DocumentedOperation>>;
  components: { schemas: Record<string, Json>; securitySchemes: Json };
};
