import fs from "node:fs";
import path from "node:path";
import { describe, expect, test } from "vitest";
import { MORE_PLACES, PLACES } from "@/components/ui/places";

const app = path.resolve(import.meta.dirname, "../app");

/** Addresses that have a page, parts in square brackets as the folders have them: `/sensors/[id]`. */
const addresses = fs
  .readdirSync(app, { recursive: true, encoding: "utf8" })
  .filter((file) => path.basename(file) === "page.tsx")
  .map((file) => `/${path.dirname(file).split(path.sep).filter((part) => part !== "." && !part.startsWith("(")).join("/")}`);

const leads = (href: string) => addresses.some((address) => new RegExp(`^${address.replaceAll(/\[[^\]]+\]/g, "[^/]+")}$`).test(href));

test.each([...PLACES, ...MORE_PLACES].map(({ label, href }) => [label, href]))("the menu's %s leads to a page, %s", (_, href) => {
  expect(leads(href)).toBe(true);
});

test("the keys after g are all different", () => {
  const keys = [...PLACES, ...MORE_PLACES].flatMap(({ key }) => key ?? []);
  expect(keys.filter((key, i) => keys.indexOf(key) !== i)).toEqual([]);
});

describe("links that pages write down", () => {
  const sources = ["app", "components"].flatMap((folder) => {
    const root = path.resolve(app, "..", folder);
    return fs.readdirSync(root, { recursive: true, encoding: "utf8" }).filter((file) => file.endsWith(".tsx")).map((file) => ({ file: `${folder}/${file}`, text: fs.readFileSync(path.join(root, file), "utf8") }));
  });
  /** `href="/rigs"`, href={`/rigs/${id}`}, push(`/rigs`): a `${…}` stands for one part of the address. */
  const written = /(?:href|action)=(?:"(\/[^"]*)"|\{`(\/[^`]*)`\})|(?:push|replace)\((?:"(\/[^"]*)"|`(\/[^`]*)`)\)/g;
  const links = sources.flatMap(({ file, text }) =>
    [...text.matchAll(written)].map((found) => ({ file, href: (found[1] ?? found[2] ?? found[3] ?? found[4] ?? "").replaceAll(/\$\{[^}]*\}/g, "x").replace(/[?#].*$/, "") })),
  );

  test("are found", () => expect(links.length).toBeGreaterThan(20));

  const isFile = (href: string) => href !== "/" && fs.existsSync(path.join(app, "../public", href));

  test("each leads to a page, a call of the API or a public file", () => {
    const dead = links.filter(({ href }) => !href.startsWith("/api/") && !leads(href) && !isFile(href));
    expect(dead).toEqual([]);
  });
});
