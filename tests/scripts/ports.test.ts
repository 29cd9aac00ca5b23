import net from "node:net";
import { expect, test } from "vitest";
import { choosePorts } from "@/scripts/lib/data-directory.mjs";
import { freePort, isFree, portFrom } from "@/scripts/lib/ports.mjs";

const kept = { web: 3000, postgres: 5433, smtp: 1025, inbox: 1080 };
const except = (...taken: number[]) => async (port: number) => !taken.includes(port);

test("a port that something listens on is not free, and is again afterwards", async () => {
  const port = await freePort();
  const server = net.createServer();
  await new Promise<void>((resolve) => server.listen(port, "127.0.0.1", resolve));
  expect(await isFree(port)).toBe(false);
  await new Promise((resolve) => server.close(resolve));
  expect(await isFree(port)).toBe(true);
});

test("the next free port is taken, up to the last there is", async () => {
  expect(await portFrom(3000, { free: except(3000, 3001) })).toBe(3002);
  expect(await portFrom(3000, { taken: new Set([3000]), free: except() })).toBe(3001);
  expect(await portFrom(65_534, { free: except(65_534, 65_535) })).toBeUndefined();
});

test("usual ports are used when they are free, without a word", async () => {
  expect(await choosePorts({}, kept, except())).toEqual({ ...kept, note: undefined });
});

test("a taken usual port is replaced and said so", async () => {
  expect(await choosePorts({}, kept, except(3000, 5433))).toMatchObject({
    web: 3001,
    postgres: 5434,
    note: "Port 3000 is taken; using 3001.",
  });
});

test("a port that was asked for is taken or refused, never replaced", async () => {
  expect(await choosePorts({ PORT: "4300" }, kept, except(3000))).toMatchObject({ web: 4300, note: undefined });
  await expect(choosePorts({ PORT: "4300" }, kept, except(4300))).rejects.toThrow("Port 4300 is taken by another program");
  await expect(choosePorts({ PORT: "80a" }, kept, except())).rejects.toThrow(/PORT must be a port number/);
});

test("the database keeps its port unless it is told another or loses it", async () => {
  const last = { ...kept, postgres: 5500 };
  expect(await choosePorts({}, last, except())).toMatchObject({ postgres: 5500 });
  expect(await choosePorts({}, last, except(5500))).toMatchObject({ postgres: 5501 });
  expect(await choosePorts({ LONGREED_POSTGRES_PORT: "6000" }, last, except())).toMatchObject({ postgres: 6000 });
});

test("no two services get the same port", async () => {
  const ports = await choosePorts({ PORT: "1025" }, kept, except());
  expect(new Set([ports.web, ports.postgres, ports.smtp, ports.inbox]).size).toBe(4);
});
