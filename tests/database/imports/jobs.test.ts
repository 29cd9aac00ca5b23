import { afterAll, describe, expect, test } from "vitest";
import { row, rows, sequelize } from "@/lib/db";
import { acceptImport } from "@/lib/imports/accept";
import { cancelImport } from "@/lib/imports/cancel";
import { findImports, getImport } from "@/lib/imports/read";
import { receiveImport } from "@/lib/imports/receive";
import { findWaitingImports, lockImport, runImport } from "@/lib/imports/run";
import { inTransaction } from "@/lib/db";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { actor } from "../../factories/person";
import { signedInAs } from "../../factories/session";
import { aCampaign, csvOf, formOf, upload } from "../../factories/upload";

afterAll(() => sequelize.close());

const now = new Date("2026-05-14T08:00:00Z");

/** A file received and left for a worker, as one of more than 50 000 rows is. */
async function waiting(file: string, fields: Record<string, string | object> = {}) {
  const by = await actor("researcher");
  const received = await receiveImport({ request: new Request("https://longreed.example/", { method: "POST", body: formOf({ file, fields }) }), personId: by.id, now });
  const { status, data } = await acceptImport({ by, received: { ...received, lines: 60_000 }, now });
  return { status, by, ...(data as { importRunId: string; campaignId: string }) };
}

describe("a large file", () => {
  const text = csvOf(aCampaign({ cycles: 3, repeats: 30, begin: "2026-01-01T00:00:00Z" }));

  test("is answered at once and imported by a worker; until then there is no campaign", async () => {
    const { status, importRunId, campaignId } = await waiting(text);
    expect(status).toBe(202);
    expect(await getImport({ importRunId, now })).toMatchObject({ state: "waiting", campaignId, problem: null });
    expect(await row(`select id from campaign where id = $1`, [campaignId])).toBeUndefined();
    expect(await findWaitingImports()).toContain(importRunId);

    expect(await runImport({ importRunId, now })).toMatchObject({ state: "done", campaignId, readings: 180, phases: 6 });
    expect(await getImport({ importRunId, now })).toMatchObject({ state: "done", rowsRead: 180, rowsStored: 180, phases: 6 });
    expect(await row(`select state from campaign where id = $1`, [campaignId])).toEqual({ state: "finished" });
    expect(await rows(`select n from import_chunk where import_run_id = $1`, [importRunId])).toEqual([]);
    expect(await findWaitingImports()).not.toContain(importRunId);
  });

  test("is recognised when it comes again, under whatever name", async () => {
    const first = await row<{ campaignId: string }>(`select campaign_id as "campaignId" from import_run where state = 'done' order by id desc limit 1`);
    expect(await upload({ file: text, fileName: "another.csv", fields: { name: "Another" } })).toEqual({ status: 200, body: { campaignId: first?.campaignId, imported: 0, alreadyImported: true } });
  });

  test("is recognised while it waits, too: one import, one campaign", async () => {
    const other = csvOf(aCampaign({ cycles: 1, repeats: 9, begin: "2026-01-02T00:00:00Z" }));
    const first = await waiting(other);
    const again = await upload({ file: other });
    expect(again).toEqual({ status: 202, body: { importRunId: first.importRunId, campaignId: first.campaignId } });
    const outcomes = await Promise.all([runImport({ importRunId: first.importRunId, now }), runImport({ importRunId: first.importRunId, now })]);
    expect(outcomes.map(({ state }) => state).toSorted()).toEqual(["done", "waiting"]);
    expect(await row(`select count(*)::int as n from reading r join step s on s.id = r.step_id where s.campaign_id = $1`, [first.campaignId])).toEqual({ n: 18 });
  });

  test("sent twice at the same moment is one import", async () => {
    const other = csvOf(aCampaign({ cycles: 1, repeats: 8, begin: "2026-01-03T00:00:00Z" }));
    const answers = await Promise.all([upload({ file: other }), upload({ file: other })]);
    expect(new Set(answers.map(({ body }) => body.campaignId)).size).toBe(1);
    expect(await row(`select count(*)::int as n from campaign where id = $1`, [answers[0].body.campaignId])).toEqual({ n: 1 });
  });

  test("that is refused says so in the import, and leaves nothing", async () => {
    const { importRunId, campaignId } = await waiting("takenAt,medium,f0Hz,q\n2026-01-01,air,2400,1800\n2026-01-01,air,0,1800\n");
    expect(await runImport({ importRunId, now })).toMatchObject({ state: "refused" });
    expect(await getImport({ importRunId, now })).toMatchObject({ state: "refused", problem: { errors: [{ path: "line 3, f0Hz", message: "“0” must be above 0" }], errorCount: 1 } });
    expect(await rows(`select id from campaign where id = $1 union all select id from step where campaign_id = $1`, [campaignId])).toEqual([]);
  });

  test("goes on after a lost worker: what it had begun is rolled back and begun anew", async () => {
    const { importRunId, campaignId } = await waiting(csvOf(aCampaign({ cycles: 2, repeats: 12, begin: "2026-01-04T00:00:00Z" })));
    await rows(`update import_run set state = 'running', started_at = $2 where id = $1`, [importRunId, now]);
    expect(await findWaitingImports()).toContain(importRunId);
    expect(await runImport({ importRunId, now })).toMatchObject({ state: "done", campaignId, readings: 48 });
  });
});

describe("cancelImport", () => {
  test("ends one that waits at once, for good", async () => {
    const { importRunId, campaignId, by } = await waiting(csvOf(aCampaign({ cycles: 1, repeats: 7, begin: "2026-01-05T00:00:00Z" })));
    expect(await cancelImport({ by, importRunId, now })).toMatchObject({ state: "cancelled", endedAt: now.toISOString() });
    expect(await runImport({ importRunId, now })).toEqual({ state: "waiting" });
    expect(await row(`select id from campaign where id = $1`, [campaignId])).toBeUndefined();
    expect(await cancelImport({ by, importRunId, now })).toMatchObject({ state: "cancelled" });
  });

  test("asks the worker that is at it, and is a conflict when it is over", async () => {
    const { importRunId, by } = await waiting(csvOf(aCampaign({ cycles: 1, repeats: 6, begin: "2026-01-06T00:00:00Z" })));
    await inTransaction(async (atIt) => {
      expect(await lockImport(atIt, importRunId)).toBe(true);
      expect(await cancelImport({ by, importRunId, now })).toMatchObject({ state: "waiting", cancelWanted: true });
    });
    expect(await runImport({ importRunId, now })).toEqual({ state: "cancelled" });
    const done = await waiting(csvOf(aCampaign({ cycles: 1, repeats: 5, begin: "2026-01-07T00:00:00Z" })));
    await runImport({ importRunId: done.importRunId, now });
    await expect(cancelImport({ by, importRunId: done.importRunId, now })).rejects.toMatchObject({ status: 409 });
    await expect(cancelImport({ by: await actor("operator"), importRunId, now })).rejects.toMatchObject({ status: 403 });
    await expect(cancelImport({ by, importRunId: "999999", now })).rejects.toMatchObject({ status: 404 });
  });
});

test("raw sweeps are kept and fitted like those of a rig", async () => {
  const frequencyHz = linearGrid(2380, 2420, 101);
  const truth = [2399.5, 2400.25, 2400.75];
  const lines = truth.map((f0Hz, i) => {
    const { re, im } = evaluateResonance(frequencyHz, { readout: "velocity", f0Hz, q: 400, a: { re: 0.1, im: 0.02 }, b: { re: 0.001, im: 0 }, c: { re: 0, im: 0 } });
    return `2026-02-0${i + 1}T00:00:00Z,air,2380,2420,${re.join(" ")},${im.join(" ")}`;
  });
  const { status, body } = await upload({ file: `takenAt,medium,startHz,stopHz,re,im\n${lines.join("\n")}\n` });
  expect(status).toBe(201);
  const fits = await rows<{ f0Hz: number; q: number; kind: number; points: number }>(
    `select f.f0_hz as "f0Hz", f.q, r.kind, w.points from step s join reading r on r.step_id = s.id join sweep w on w.step_id = r.step_id and w.idx = r.idx join fit f on f.step_id = r.step_id and f.idx = r.idx
      where s.campaign_id = $1 order by r.at`,
    [body.campaignId],
  );
  fits.forEach(({ f0Hz, q, kind, points }, i) => {
    expect(f0Hz).toBeCloseTo(truth[i], 5);
    expect(q).toBeCloseTo(400, 2);
    expect([kind, points]).toEqual([1, 101]);
  });
});

test("an Idempotency-Key gives the first answer again, and is refused with another file", async () => {
  const { cookie } = await signedInAs("researcher");
  const file = csvOf(aCampaign({ cycles: 1, repeats: 4, begin: "2026-01-08T00:00:00Z" }));
  const headers = { "idempotency-key": "one-import" };
  const first = await upload({ file, cookie, headers });
  expect(first.status).toBe(201);
  expect(await upload({ file, cookie, headers })).toEqual(first);
  expect((await upload({ file: `${file}\n`, cookie, headers })).status).toBe(422);
  expect(await row(`select count(*)::int as n from import_run where state = 'receiving'`)).toEqual({ n: 0 });
});

test("the list has the newest first", async () => {
  const { items } = await findImports({ query: { limit: 2 }, now });
  expect(items).toHaveLength(2);
  expect(Number(items[0].id)).toBeGreaterThan(Number(items[1].id));
});
