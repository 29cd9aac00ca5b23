import { afterAll, test } from "vitest";
import { sequelize } from "@/lib/db";
import { buildCampaign } from "../factories/campaign";
import { buildRig } from "../factories/rig";
import { account, browserOfTests, signIn } from "./browser";

const browser = browserOfTests();
afterAll(() => sequelize.close());

/** Far under the minute after which a page would ask by itself. */
const SOON = { timeout: 10_000 };

test("what one person does, others see without asking, in every tab", async () => {
  const rig = await buildRig({ name: "Followed bench" });
  const campaign = await buildCampaign({ rigId: rig.id, state: "queued", name: "To be followed" });
  const address = `/campaigns/C-${campaign.id}`;

  const reader = await browser.open();
  await signIn(reader, await account("viewer", "F. Ostrander"));
  const followed = reader.waitForRequest((request) => request.url().endsWith("/api/changes"));
  await reader.goto(address);
  await followed;
  const secondTab = await reader.context().newPage();
  await secondTab.goto(address);
  await secondTab.getByRole("heading", { name: "To be followed" }).waitFor();

  const writer = await browser.open();
  await signIn(writer, await account("operator", "G. Paulsen"));
  await writer.goto(address);
  await writer.getByRole("button", { name: "Add a note" }).click();
  await writer.getByRole("textbox", { name: /note/i }).fill("The bottle on port 2 is nearly empty");
  await writer.getByRole("button", { name: "Add the note" }).click();

  await reader.getByText("The bottle on port 2 is nearly empty").waitFor(SOON);
  await secondTab.getByText("The bottle on port 2 is nearly empty").waitFor(SOON);
});
