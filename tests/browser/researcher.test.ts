import type { Page } from "playwright-core";
import { afterAll, expect, test } from "vitest";
import { row, rows, sequelize } from "@/lib/db";
import type { Definition } from "@/lib/protocol/schema";
import { Bench } from "../factories/bench";
import { aDefinition, buildProtocolVersion } from "../factories/protocol";
import { account, browserOfTests, signIn } from "./browser";
import { fillSheet } from "./write-protocol";

const browser = browserOfTests();
afterAll(() => sequelize.close());

const POLL = { timeout: 30_000, interval: 200 };
const sweep = { centre: "track" as const, span: { halfWidths: 8 }, points: 61, dwell: { ringDowns: 5 }, driveV: 0.1 };
const inAir: Definition["blocks"] = [{ id: "air", kind: "measure", medium: "air", role: "reference", repeats: 500, discard: 0, pauseS: 0, sweep }];

/** A campaign that measures in air at this moment. */
async function measuring(): Promise<Bench> {
  const bench = await Bench.make({ clock: "real", definition: { blocks: inAir } });
  bench.nowMs = bench.clockMs = Date.now();
  await bench.hello();
  await expect.poll(async () => (await bench.next())?.kind, POLL).toBe("measure");
  return bench;
}

const holdsOf = ({ campaign }: Bench) => rows(`select h.reason, h.text, h.released_at is not null as over from hold h where h.campaign_id = $1 order by h.id`, [campaign.id]);

async function confirm(page: Page, verb: string, why?: string): Promise<void> {
  const dialog = page.getByRole("alertdialog");
  if (why) await dialog.getByLabel("Why").fill(why);
  await dialog.getByRole("button", { name: verb, exact: true }).click();
  await dialog.waitFor({ state: "detached" });
}

test("a researcher takes a rig over and gives it back from the campaign's page, then from the rig's", async () => {
  const bench = await measuring();
  const page = await browser.open();
  await signIn(page, await account("researcher", "R. Askham"));
  await page.goto(`/campaigns/C-${bench.campaign.id}`);
  await page.getByRole("button", { name: "Take over" }).click();
  await confirm(page, "Take over", "a leak to look at");
  await page.getByText(`You have taken over ${bench.rig.name}.`).waitFor();
  await page.getByRole("list", { name: "What holds it" }).getByText("Taken over by hand").waitFor();
  expect(await holdsOf(bench)).toMatchObject([{ reason: "takeOver", over: false }]);
  await page.getByRole("button", { name: "Give back" }).click();
  await page.getByText(`${bench.rig.name} was given back.`).waitFor();
  await page.getByRole("button", { name: "Take over" }).waitFor();
  expect(await holdsOf(bench)).toMatchObject([{ reason: "takeOver", over: true }]);

  await page.goto(`/rigs/${bench.rig.id}`);
  await page.getByRole("button", { name: "Take over" }).click();
  await confirm(page, "Take over");
  await page.getByRole("button", { name: "Give back" }).click();
  await page.getByRole("button", { name: "Take over" }).waitFor();
  expect(await holdsOf(bench)).toMatchObject([{ over: true }, { reason: "takeOver", over: true }]);
});

test("a researcher sets a campaign aside with a reason, which frees the rig, and takes it back on", async () => {
  const bench = await measuring();
  const page = await browser.open();
  await signIn(page, await account("researcher", "S. Birk"));
  await page.goto(`/campaigns/C-${bench.campaign.id}`);
  await page.getByRole("button", { name: "Set aside" }).click();
  await page.getByRole("alertdialog").getByRole("button", { name: /not possible: say why first/ }).waitFor();
  await confirm(page, "Set aside", "an urgent customer");
  await page.getByText(`C-${bench.campaign.id} is being set aside.`).waitFor();
  await page.getByRole("list", { name: "What holds it" }).getByText("an urgent customer").waitFor();
  const campaign = () => row<{ state: string; aside: boolean; parking: string }>(`select state, set_aside as aside, parking from campaign where id = $1`, [bench.campaign.id]);
  await expect
    .poll(async () => {
      bench.pass(1);
      await bench.heartbeat().catch(() => undefined);
      await bench.next().catch(() => undefined);
      return campaign();
    }, POLL)
    .toMatchObject({ state: "held", aside: true });
  await page.goto(`/rigs/${bench.rig.id}`);
  await page.getByText("Free", { exact: true }).waitFor();

  await page.goto(`/campaigns/C-${bench.campaign.id}`);
  await page.getByRole("button", { name: "Go on" }).click();
  const dialog = page.getByRole("dialog");
  await dialog.getByText("it was set aside; a new reference comes first").waitFor();
  await dialog.getByRole("button", { name: "Go on" }).click();
  await expect.poll(campaign, POLL).toMatchObject({ aside: false });
  expect(await holdsOf(bench)).toMatchObject([{ reason: "setAside", text: "an urgent customer", over: true }]);
});

test("a researcher changes a protocol, saves version 2 with a note, and sees what differs from version 1", async () => {
  const { protocolId } = await buildProtocolVersion({ definition: aDefinition({ name: "Fills to compare" }) });
  const page = await browser.open();
  await signIn(page, await account("researcher", "T. Holm"));
  await page.goto(`/protocols/${protocolId}`);
  await page.getByRole("link", { name: "New version" }).click();
  await page.getByRole("button", { name: /^Measure .*air/ }).first().click();
  await fillSheet(page, /^Measure/, { Repeats: "24" });
  await page.getByRole("button", { name: "Save version 2" }).click();
  await page.getByRole("dialog").getByLabel("What changed, and why").fill("Longer references");
  await page.getByRole("dialog").getByRole("button", { name: "Save version" }).click();
  await page.waitForURL((url) => url.pathname === `/protocols/${protocolId}`);
  await page.getByText("Longer references").waitFor();

  await page.getByRole("link", { name: "Compare with version 1" }).click();
  await page.getByText("One place differs.").waitFor();
  await page.getByRole("group", { name: "Version 1" }).getByText(/10/).first().waitFor();
  await page.getByRole("group", { name: "Version 2" }).getByText(/24/).first().waitFor();
});
