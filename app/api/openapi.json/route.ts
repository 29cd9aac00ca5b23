import { env } from "@/lib/env";
import { openApiDocument, operationsOf, pathOf } from "@/lib/http/openapi";
import { route } from "@/lib/http/route";

/** Every route of the application, loaded at the first call: the document needs no list that could fall behind. */
const modules = import.meta.glob<Record<string, unknown>>("../**/route.ts");

let document: Promise<Record<string, unknown>> | undefined;

export const GET = route({
  permission: "public",
  summary: "This reference, as OpenAPI 3.1",
  handle: () => (document ??= build()),
});

async function build(): Promise<Record<string, unknown>> {
  // Addresses that catch all (next-auth's own and unknown ones) are no calls of the contract, and this one is here already.
  const files = Object.keys(modules).filter((file) => file.startsWith("../") && !file.includes("[...") && !file.includes("openapi.json"));
  const routes = await Promise.all(files.map(async (file) => ({ path: pathOf(file.slice(3)), operations: operationsOf(await modules[file]()) })));
  return openApiDocument([...routes, { path: "/api/openapi.json", operations: operationsOf({ GET }) }], env().APP_URL);
}
