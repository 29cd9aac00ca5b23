import fs from "node:fs";
import path from "node:path";
import { describe, expect, test } from "vitest";

const root = path.resolve(import.meta.dirname, "..");
const folders = ["app", "components", "jobs", "lib", "migrations", "models", "rig-simulator"];

type Source = { file: string; text: string; imports: string[] };

const sources: Source[] = folders
  .filter((folder) => fs.existsSync(path.join(root, folder)))
  .flatMap((folder) => fs.readdirSync(path.join(root, folder), { recursive: true, encoding: "utf8" }).map((file) => `${folder}/${file}`))
  .filter((file) => /\.tsx?$/.test(file))
  .map((file) => {
    const text = fs.readFileSync(path.join(root, file), "utf8");
    return { file, text, imports: importsOf(file, text) };
  });

/** What a file imports, relative paths of our own seen from the root. */
function importsOf(file: string, text: string): string[] {
  return [...text.matchAll(/(?:^|\n)\s*(?:import|export)\b[^;"']*?from\s*["']([^"']+)["']|\bimport\(\s*["']([^"']+)["']\s*\)|(?:^|\n)import\s+["']([^"']+)["']/g)]
    .map((found) => found[1] ?? found[2] ?? found[3] ?? "")
    .map((name) => (name.startsWith("@/") ? name.slice(2) : name.startsWith(".") ? path.posix.join(path.posix.dirname(file), name) : `npm:${name}`));
}

/** Every import of the files in `from` that is not allowed, as "file → import". */
function strays(from: RegExp, allowed: (name: string, file: string) => boolean): string[] {
  return sources
    .filter(({ file }) => from.test(file))
    .flatMap(({ file, imports }) => imports.filter((name) => !allowed(name, file)).map((name) => `${file} → ${name}`));
}

const ours = (name: string) => !name.startsWith("npm:");
const npm = (...names: string[]) => (name: string) => names.some((allowed) => name === `npm:${allowed}` || name.startsWith(`npm:${allowed}/`));

describe("imports point one way", () => {
  test("numerics stand alone: no framework, no database, nothing else of ours", () => {
    expect(strays(/^lib\/numerics\//, (name) => (ours(name) ? name.startsWith("lib/numerics/") : npm("ml-matrix", "@stdlib", "pure-rand")(name) || name.startsWith("npm:@stdlib")))).toEqual([]);
  });

  test("the protocol's interpreter knows numerics and schemas, and no input or output", () => {
    expect(strays(/^lib\/protocol\//, (name) => (ours(name) ? /^lib\/(protocol|numerics)\//.test(name) : npm("zod", "date-fns", "date-fns-tz")(name)))).toEqual([]);
  });

  test("models know the database, each other and the types of the protocol", () => {
    expect(strays(/^models\//, (name) => (ours(name) ? /^(models|lib\/protocol)\/|^lib\/db$/.test(name) : npm("sequelize")(name)))).toEqual([]);
  });

  test("migrations know no model of today", () => {
    expect(strays(/^migrations\//, (name) => name === "npm:sequelize" || name.startsWith("migrations/"))).toEqual([]);
  });

  test("lib knows no screen, no route and no job", () => {
    expect(strays(/^lib\//, (name) => !/^(app|jobs|components|rig-simulator)\//.test(name))).toEqual([]);
  });

  test("screens, routes and jobs reach the data through use cases", () => {
    expect(strays(/^(app|jobs)\//, (name) => !name.startsWith("models/"))).toEqual([]);
  });

  test("components know neither models nor features", () => {
    const helpers = /^lib\/(format|numerics\/|http\/fetch-json$)/;
    expect(strays(/^components\//, (name) => !ours(name) || name.startsWith("components/") || helpers.test(name))).toEqual([]);
  });

  test("the simulated rig is an agent like any other: of the server it shares only the published properties of fluids", () => {
    expect(strays(/^rig-simulator\//, (name) => !ours(name) || /^(rig-simulator|lib\/fluids)\//.test(name))).toEqual([]);
  });
});

describe("numerics and interpreter are the same whenever they run", () => {
  test("no clock, no random source and no environment of their own", () => {
    const impure = /\bDate\.now\(|\bnew Date\(\)|\bMath\.random\(|\bprocess\.|\bperformance\.|\bcrypto\./;
    const found = sources.filter(({ file, text }) => /^lib\/(numerics|protocol)\//.test(file) && impure.test(text)).map(({ file }) => file);
    expect(found).toEqual([]);
  });
});

describe("routes", () => {
  const routes = sources.filter(({ file }) => /^app\/.*\/route\.ts$/.test(file) && !file.startsWith("app/api/auth/"));

  test("there are some", () => expect(routes.length).toBeGreaterThan(10));

  test.each(routes.map(({ file, text }) => [file, text]))("%s goes through the one wrapper of its face", (file, text) => {
    const wrapper = file.startsWith("app/api/agent/") ? "agentRoute" : "route";
    expect(text).toContain(`import { ${wrapper} } from "@/lib/http/${wrapper === "route" ? "route" : "agent-route"}"`);
    const bare = [...text.matchAll(/export (?:async )?(?:function|const) (GET|POST|PUT|PATCH|DELETE)\b(.*)/g)].filter(([, , rest]) => !rest.includes(`= ${wrapper}(`));
    expect(bare.map(([line]) => line)).toEqual([]);
  });
});

describe("files", () => {
  test("no barrels: a file that only passes on is imported by everything", () => {
    const barrels = sources.filter(({ file, text }) => /(^|\/)index\.tsx?$/.test(file) || (/^export .* from /m.test(text) && !/^(export )?(async )?(default|const|function|class|type|interface|let)\b/m.test(text)));
    expect(barrels.map(({ file }) => file)).toEqual([]);
  });

  test("each can be read in one sitting", () => {
    const long = sources.map(({ file, text }) => ({ file, lines: text.split("\n").length })).filter(({ lines }) => lines > 350);
    expect(long).toEqual([]);
  });

  test("names are in kebab-case", () => {
    const odd = sources.map(({ file }) => path.basename(file)).filter((name) => !/^[a-z0-9]+([-.][a-z0-9]+)*\.tsx?$/.test(name));
    expect(odd).toEqual([]);
  });

  test("no rule of the linter is switched off", () => {
    expect(sources.filter(({ text }) => /eslint-disable|@ts-ignore|@ts-nocheck|@ts-expect-error/.test(text)).map(({ file }) => file)).toEqual([]);
  });
});
