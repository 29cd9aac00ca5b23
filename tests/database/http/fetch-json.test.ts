import http from "node:http";
import type { AddressInfo } from "node:net";
import { afterAll, beforeAll, expect, test } from "vitest";
import { z } from "zod";
import { conflict, invalid } from "@/lib/errors";
import { fetchJson, ProblemError } from "@/lib/http/fetch-json";
import { problemResponse } from "@/lib/http/problem";

const answers: Record<string, () => Response> = {
  "/good": () => Response.json({ n: 1, later: "ignored" }),
  "/wrong": () => Response.json({ n: "1" }),
  "/nothing": () => new Response(null, { status: 204 }),
  "/taken": () => problemResponse(conflict("M. Tollan was faster", "already-there", { by: "M. Tollan" }), "request-1", { method: "POST", path: "/taken" }),
  "/fields": () => problemResponse(invalid([{ path: "name", message: "is missing" }]), "request-2", { method: "POST", path: "/fields" }),
  "/page": () => new Response("<h1>Bad gateway</h1>", { status: 502 }),
};

let server: http.Server;
let base: string;
beforeAll(async () => {
  server = http.createServer((asked, answer) => {
    const response = answers[asked.url ?? ""]?.() ?? new Response(null, { status: 404 });
    void response.arrayBuffer().then((body) => answer.writeHead(response.status, Object.fromEntries(response.headers)).end(Buffer.from(body)));
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  base = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
});
afterAll(() => new Promise((resolve) => server.close(resolve)));

const refusal = (path: string) => fetchJson(base + path).then(() => undefined, (error: unknown) => error);

test("an answer is parsed, and one that does not fit is an error, not data", async () => {
  expect(await fetchJson(`${base}/good`, { answer: z.object({ n: z.number() }) })).toEqual({ n: 1 });
  await expect(fetchJson(`${base}/wrong`, { answer: z.object({ n: z.number() }) })).rejects.toBeInstanceOf(z.ZodError);
  expect(await fetchJson(`${base}/nothing`, { method: "POST", body: {} })).toBeUndefined();
});

test("a refusal keeps code, status, members, fields and request id", async () => {
  expect(await refusal("/taken")).toMatchObject({ code: "already-there", status: 409, detail: "M. Tollan was faster", members: { by: "M. Tollan" }, requestId: "request-1" });
  expect(await refusal("/fields")).toMatchObject({ code: "invalid", fields: [{ path: "name", message: "is missing" }] });
});

test("what is no problem answer, and no answer at all, are refusals too", async () => {
  expect(await refusal("/page")).toMatchObject({ code: "unreadable", status: 502 });
  const nowhere = await fetchJson("http://127.0.0.1:1/").catch((error: unknown) => error);
  expect(nowhere).toBeInstanceOf(ProblemError);
  expect(nowhere).toMatchObject({ code: "offline", status: 0 });
});

test("a call that was given up stays what it is", async () => {
  const given = new AbortController();
  given.abort();
  await expect(fetchJson(`${base}/good`, { signal: given.signal })).rejects.toMatchObject({ name: "AbortError" });
});
