import type { Locator, Page } from "playwright-core";

/** Writes a protocol in the editor as a person does: eight cycles of air, one liquid, drain and dry, with two limits. */
export async function writeProtocol(page: Page, { name, cycles, repeats }: { name: string; cycles: number; repeats: number }): Promise<void> {
  await page.goto("/protocols");
  await page.getByRole("link", { name: "New protocol" }).first().click();
  await page.getByRole("link", { name: "Begin empty" }).click();
  await page.getByLabel("Name", { exact: true }).fill(name);

  await choose(page, page.getByRole("button", { name: "Add step", exact: true }).first(), /^Repeat/);
  await fillSheet(page, /^Repeat/, { Times: String(cycles) });
  await page.getByRole("button", { name: /^Measure/ }).first().click();
  await fillSheet(page, /^Measure/, { Repeats: String(repeats), "Pause between": "1 s", Points: "61" });

  const inside = page.getByRole("button", { name: "Add a step in here" });
  await choose(page, inside, /^Fill/);
  await fillSheet(page, /^Fill/, { Slot: "sample", Volume: "40", Flow: "20" });
  await choose(page, inside, /^Measure/);
  await fillSheet(page, /^Measure/, { In: "sample", Repeats: String(repeats), "Pause between": "1 s", Points: "61" });
  await choose(page, inside, /^Drain/);
  await fillSheet(page, /^Drain/, {});
  await choose(page, inside, /^Dry/);
  await fillSheet(page, /^Dry/, { For: "30 min" });

  const limits = page.getByRole("button", { name: "Add limit" });
  await choose(page, limits, /^The reference does not come back/);
  await fillLimit(page, { "Off by more than": "30" });
  await choose(page, limits, /^A slow drift/);
  await fillLimit(page, { "More than": "5" });

  await page.getByRole("button", { name: "Save version 1" }).click();
  await page.getByRole("dialog").getByRole("button", { name: "Save version" }).click();
  await page.waitForURL(/\/protocols\/\d+$/);
}

async function choose(page: Page, trigger: Locator, item: RegExp): Promise<void> {
  await trigger.click();
  await page.getByRole("menuitem", { name: item }).click();
}

export async function fillSheet(page: Page, sentence: RegExp, fields: Readonly<Record<string, string>>): Promise<void> {
  const sheet = page.getByRole("group", { name: sentence }).last();
  for (const [label, value] of Object.entries(fields)) await sheet.getByLabel(label, { exact: true }).fill(value);
  await sheet.getByRole("button", { name: "Done" }).click();
}

async function fillLimit(page: Page, fields: Readonly<Record<string, string>>): Promise<void> {
  const row = page.getByRole("listitem").filter({ has: page.getByLabel("Watches for") });
  for (const [label, value] of Object.entries(fields)) await row.getByLabel(label, { exact: true }).fill(value);
  await row.getByRole("button", { name: "Done" }).click();
}
