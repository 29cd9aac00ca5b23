import { afterAll, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { buildCampaign } from "../factories/campaign";
import { buildMount } from "../factories/mount";
import { buildProtocolVersion } from "../factories/protocol";
import { buildRig } from "../factories/rig";
import { buildSensor } from "../factories/sensor";
import { account, browserOfTests, signIn } from "./browser";

const browser = browserOfTests();
afterAll(() => sequelize.close());

/** What changes something, on whatever page. */
const VERBS =
  /^(Queue( a campaign)?|Pause|Go on|Stop|Set aside|Take over|Give back|I have this|Clear|Shelve|Bottle loaded|Emptied|Mount.*|End the mount|Cannot|Done|Later|Leave out|Block time|Unblock|Load|Add a note|Edit|Retire|Bring back|Delete|New .*|Make .*|Invite .*|Withdraw|Run again|Save.*|Go on with the draft|Begin .*)$/;

test("a viewer reads everything, finds no verb on any page, and is told who may open the others", async () => {
  const rig = await buildRig({ name: "Show bench" });
  const sensor = await buildSensor({ serial: "WR-7001" });
  await buildMount({ rigId: rig.id, sensorId: sensor.id });
  const version = await buildProtocolVersion();
  const campaign = await buildCampaign({ rigId: rig.id, sensorId: sensor.id, protocolVersionId: version.id, state: "stopped", name: "To be looked at" });

  const page = await browser.open();
  await signIn(page, await account("viewer", "V. Lindqvist"));
  const pages = ["/", "/campaigns", `/campaigns/C-${campaign.id}`, "/protocols", `/protocols/${version.protocolId}`, "/sensors", `/sensors/${sensor.id}`, "/rigs", `/rigs/${rig.id}`, "/liquids", "/tasks", "/alarms"];
  for (const address of pages) {
    await page.goto(address);
    await page.locator("main h1, main .say").first().waitFor();
    const offered = await page.locator("main").locator("button, a").allInnerTexts();
    expect(offered.map((text) => text.trim()).filter((text) => VERBS.test(text)), address).toEqual([]);
  }
  await page.goto(`/campaigns/C-${campaign.id}`);
  await page.getByRole("heading", { name: "To be looked at" }).waitFor();

  for (const [address, who] of [
    ["/people", "This page is for an administrator."],
    ["/audit", "This page is for an administrator."],
    ["/campaigns/new", /needs an administrator or a researcher|needs a researcher or an administrator/],
    [`/protocols/${version.protocolId}/edit`, /researcher or an administrator/],
    ["/rigs/new", /an administrator/],
  ] as const) {
    await page.goto(address);
    await page.getByText(who).first().waitFor();
  }
  await page.goto("/people");
  await page.getByRole("link", { name: "Today" }).last().click();
  await page.waitForURL((url) => url.pathname === "/");
});
