import { env } from "@/lib/env";
import { openApiDocument, operationsOf, pathOf } from "@/lib/http/openapi";
import type { OpenApiDocument } from "@/lib/http/openapi-types";

/** Every route of the application, loaded at the first call: the document needs no list that could fall behind. */
const modules = import.meta.glob<Record<string, unknown>>("./**/route.ts");

let document: Promise<OpenApiDocument> | undefined;

/** The reference of all calls, made once. */
export const openApi = (): Promise<OpenApiDocument> => (document ??= build());

async function build(): Promise<OpenApiDocument> {
  // Addresses that catch all (next-auth's own and unknown ones) are no calls of the contract.
  const files = Object.keys(modules).filter((file) => !file.includes("[..."));
  const routes = await Promise.all(files.map(async (file) => ({ path: pathOf(file.replace(/^\.\//, "")), operations: operationsOf(await modules[file]()) })));
  return openApiDocument(routes, env().APP_URL);
}
