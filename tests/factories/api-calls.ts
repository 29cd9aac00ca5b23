import { operationsOf, pathOf } from "@/lib/http/openapi";
import type { Handler, Operation } from "@/lib/http/operation";

export type ApiCall = { name: string; method: string; path: string; operation: Operation; handler: Handler };

const modules = import.meta.glob<Record<string, unknown>>("/app/api/**/route.ts", { eager: true });

/** Every call that a route file answers, those addresses left out that catch all. */
export const API_CALLS: readonly ApiCall[] = Object.entries(modules)
  .filter(([file]) => !file.includes("[..."))
  .flatMap(([file, module]) => {
    const path = pathOf(file.replace("/app/api/", ""));
    return Object.entries(operationsOf(module)).map(([method, operation]) => ({ name: `${method} ${path}`, method, path, operation, handler: module[method] as Handler }));
  })
  .toSorted((a, b) => (a.name < b.name ? -1 : 1));

/** The address with its `{id}` parts filled in. */
export const addressOf = (path: string, params: Readonly<Record<string, string>>): string => path.replaceAll(/\{(\w+)\}/g, (_, name: string) => encodeURIComponent(params[name] ?? ""));
