import type { Page } from "playwright-core";
import { afterAll, expect, test } from "vitest";
import { inTransaction, row, sequelize } from "@/lib/db";
import { openTask } from "@/lib/tasks/open-task";
import { buildLiquid } from "../factories/liquid";
import { buildLoad } from "../factories/load";
import { buildLot } from "../factories/lot";
import { buildRig } from "../factories/rig";
import { account, browserOfTests, signIn } from "./browser";

const browser = browserOfTests();
afterAll(() => sequelize.close());

const POLL = { timeout: 30_000, interval: 200 };

type Asked = { rigId: string; kind: "ask" | "load"; instruction: string; port?: number };
const ask = (task: Asked) => inTransaction((transaction) => openTask(transaction, { ...task, now: new Date() }));

const answered = async (taskId: string) => (await row<{ answer: string | null; by: string | null }>(`select t.answer, p.name as by from operator_task t left join person p on p.id = t.answered_by where t.id = $1`, [taskId]))!;

const slip = (page: Page, title: string) => page.getByRole("article").filter({ hasText: title });

test("an operator on a phone lands on the tasks, answers one, and loads a bottle by its code", async () => {
  const operator = await account("operator", "J. Marsden");
  const rig = await buildRig({ name: "Cellar bench", ports: 2 });
  const liquid = await buildLiquid({ name: "Brine of the cellar" });
  const [before, fresh] = [await buildLot({ liquidId: liquid.id, code: "BC-1" }), await buildLot({ liquidId: liquid.id, code: "BC-2" })];
  await buildLoad({ rigId: rig.id, port: 1, lotId: before.id, volumeMl: 40 });
  const wipe = await ask({ rigId: rig.id, kind: "ask", instruction: "Wipe the cellar window. A dry cloth lies there." });
  const load = await ask({ rigId: rig.id, kind: "load", port: 1, instruction: "Load Brine of the cellar on port 1 of Cellar bench: 40 mL are left" });

  const phone = await browser.open({ phone: true });
  await signIn(phone, operator);
  await phone.waitForURL("**/tasks");
  await slip(phone, "Wipe the cellar window").getByRole("button", { name: "Done" }).click();
  await expect.poll(() => answered(wipe), POLL).toEqual({ answer: "done", by: "J. Marsden" });
  await phone.getByRole("region", { name: "Done today" }).getByText("Wipe the cellar window").waitFor();

  await slip(phone, "Load Brine of the cellar").getByRole("button", { name: "Bottle loaded" }).click();
  const dialog = phone.getByRole("dialog");
  await dialog.getByLabel("Lot on the bottle").fill("nonsense");
  await dialog.getByText("No lot NONSENSE is known").waitFor();
  await dialog.getByLabel("Lot on the bottle").fill("bc-2");
  await dialog.getByText("Not the lot on the port, BC-1").waitFor();
  await dialog.getByLabel("Volume in the bottle").fill("250");
  await dialog.getByRole("button", { name: "Bottle loaded" }).click();
  await expect.poll(() => answered(load), POLL).toEqual({ answer: "done", by: "J. Marsden" });
  expect(await row(`select l.lot_id as "lotId", p.remaining_ml as ml from port p join load l on l.id = p.load_id where p.rig_id = $1 and p.number = 1`, [rig.id])).toEqual({ lotId: fresh.id, ml: 250 });
  await slip(phone, "Load Brine of the cellar").waitFor({ state: "detached" });
});

test("answers given without a network wait on the phone, can be taken back, outlive the page and go out once", async () => {
  const operator = await account("operator", "K. Orme");
  const rig = await buildRig({ name: "Far bench" });
  const [gate, valve] = [await ask({ rigId: rig.id, kind: "ask", instruction: "Close the far gate" }), await ask({ rigId: rig.id, kind: "ask", instruction: "Open the far valve" })];
  const phone = await browser.open({ phone: true });
  await signIn(phone, operator);
  await slip(phone, "Close the far gate").waitFor();

  await phone.context().setOffline(true);
  await phone.getByText("Answers are kept and sent by themselves.").waitFor();
  await slip(phone, "Close the far gate").getByRole("button", { name: "Done" }).click();
  await slip(phone, "Open the far valve").getByRole("button", { name: "Done" }).click();
  await slip(phone, "Close the far gate").getByText("Sending").waitFor();
  await slip(phone, "Open the far valve").getByRole("button", { name: "Take it back" }).click();
  await slip(phone, "Open the far valve").getByRole("button", { name: "Done" }).waitFor();
  await phone.close();
  expect(await answered(gate)).toEqual({ answer: null, by: null });

  await phone.context().setOffline(false);
  const again = await phone.context().newPage();
  await again.goto("/rigs");
  await expect.poll(() => answered(gate), POLL).toEqual({ answer: "done", by: "K. Orme" });
  expect(await answered(valve)).toEqual({ answer: null, by: null });
  expect(await row(`select count(*)::int as n from audit_event where entity = 'task' and entity_id = $1`, [gate])).toEqual({ n: 1 });
  await expect.poll(() => again.evaluate(() => Object.keys(localStorage).map((key) => localStorage.getItem(key))), POLL).toContain("[]");
});
