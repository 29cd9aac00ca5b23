import { afterAll, expect, inject, test } from "vitest";
import { row, sequelize } from "@/lib/db";
import { account, browserOfTests, PASSWORD, signIn } from "./browser";
import { inbox } from "./inbox";

const browser = browserOfTests();
afterAll(() => sequelize.close());

test("an administrator invites a person, who comes in by the mailed link with the role that was given", async () => {
  const desk = await browser.open();
  await signIn(desk, await account("administrator", "A. Harrow"));
  await desk.goto("/people");
  await desk.getByRole("button", { name: "Invite a person" }).click();
  const dialog = desk.getByRole("dialog");
  await dialog.getByLabel("E-mail").fill("n.verrall@longreed.example");
  await dialog.getByLabel("Name").fill("N. Verrall");
  await dialog.getByLabel("Role").selectOption("operator");
  await dialog.getByRole("button", { name: "Send the invitation" }).click();
  const link = await desk.getByRole("dialog").locator("code").innerText();
  await desk.getByRole("button", { name: "Put away" }).click();
  await desk.getByRole("table", { name: "Invitations" }).getByText("n.verrall@longreed.example").waitFor();
  await expect.poll(async () => (await inbox()).some(({ to, text }) => to[0].address === "n.verrall@longreed.example" && text.includes(link)), { timeout: 30_000 }).toBe(true);

  const phone = await browser.open({ phone: true });
  await phone.goto(link);
  await phone.getByLabel("Password").fill(PASSWORD);
  await phone.getByRole("button", { name: "Accept the invitation" }).click();
  await phone.waitForURL("**/tasks");

  await desk.reload();
  await desk.getByRole("row", { name: /N\. Verrall/ }).getByRole("combobox").waitFor();
  expect(await row(`select role from person where email = 'n.verrall@longreed.example'`)).toEqual({ role: "operator" });
});

test("an administrator makes a rig and a token, shown once, that its agent gets in with", async () => {
  const { appUrl } = inject("laboratory");
  const desk = await browser.open();
  await signIn(desk, await account("administrator", "A. Quarrie"));
  await desk.goto("/rigs/new");
  await desk.getByRole("button", { name: "Make rig" }).click();
  await desk.getByRole("textbox", { name: "Name" }).and(desk.locator("[aria-invalid=true]")).fill("Annex bench");
  await desk.getByRole("textbox", { name: "Ports" }).fill("2");
  await desk.getByRole("button", { name: "Make rig" }).click();
  await desk.getByRole("heading", { name: "Annex bench", level: 1 }).waitFor();
  await desk.getByText("No agent can reach this rig yet.").waitFor();

  await desk.getByLabel("New token for").fill("annex computer");
  await desk.getByRole("button", { name: "Make token" }).click();
  const token = await desk.getByRole("status").locator("code").innerText();
  const abilities = { minHz: 100, maxHz: 10_000, maxPoints: 401, maxDriveV: 1, ports: 2, kinds: ["measure", "fill", "drain"] };
  const hello = (bearer: string) =>
    fetch(`${appUrl}/api/agent/hello`, {
      method: "POST",
      headers: { authorization: `Bearer ${bearer}`, "content-type": "application/json" },
      body: JSON.stringify({ agent: { name: "annex agent", version: "1" }, clock: new Date().toISOString(), abilities }),
    });
  expect((await hello(token)).status).toBe(200);

  await desk.reload();
  await desk.getByText(`…${token.slice(-4)}`).waitFor();
  expect(await desk.content()).not.toContain(token);

  await desk.getByRole("button", { name: "Withdraw" }).click();
  await desk.getByRole("alertdialog").getByRole("button", { name: "Withdraw" }).click();
  await desk.getByText(/^withdrawn /).waitFor();
  expect((await hello(token)).status).toBe(401);
  expect(await row(`select 1 from audit_event where entity = 'rig' and action = 'create' and at > now() - interval '5 minutes'`)).toBeDefined();
});
