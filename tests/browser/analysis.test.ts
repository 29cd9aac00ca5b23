import fs from "node:fs";
import { afterAll, expect, test } from "vitest";
import { row, sequelize } from "@/lib/db";
import { Bench } from "../factories/bench";
import { account, browserOfTests, signIn } from "./browser";

const browser = browserOfTests();
afterAll(() => sequelize.close());

test("a link shows a colleague the same analysis; the plot answers to keys and is handed over as CSV and PNG; a repeat is left out with what that does", { timeout: 120_000 }, async () => {
  const bench = await Bench.make();
  bench.truth = ({ medium, index }) => (medium === "air" ? { f0Hz: index === 3 ? 2400.2 : 2400, q: 1800, temperatureC: 25 } : { f0Hz: 2100, q: 60 });
  await bench.hello();
  await bench.run();
  const code = `C-${bench.campaign.id}`;

  const page = await browser.open();
  await signIn(page, await account("researcher", "U. Fjell"));
  await page.goto(`/campaigns/${code}/stability`);
  await page.getByRole("group", { name: "Quantity" }).getByRole("button", { name: /^Q.*fractional/ }).click();
  await page.getByRole("group", { name: "Statistic" }).getByRole("button", { name: "Modified Allan deviation" }).click();
  await page.getByRole("group", { name: "View" }).getByRole("button", { name: "Within phases" }).click();
  const named = `Modified Allan deviation of Q, ${code}`;
  await page.getByRole("figure", { name: named }).waitFor();

  const colleague = await browser.open();
  await signIn(colleague, await account("viewer", "V. Holt"));
  await colleague.goto(page.url());
  const plot = colleague.getByRole("figure", { name: named });
  await plot.waitFor();
  for (const [group, choice] of [["Statistic", "Modified Allan deviation"], ["View", "Within phases"]]) {
    expect(await colleague.getByRole("group", { name: group }).getByRole("button", { name: choice }).getAttribute("aria-pressed")).toBe("true");
  }

  await plot.getByRole("img").focus();
  await colleague.keyboard.press("ArrowRight");
  await plot.getByText(/68 % from/).waitFor();
  const [download] = await Promise.all([colleague.waitForEvent("download"), plot.getByRole("button", { name: "CSV" }).click()]);
  expect(download.suggestedFilename()).toBe(`${code}-mdev-q.csv`);
  const [head, first] = fs.readFileSync(await download.path(), "utf8").split("\r\n");
  expect(head).toContain("τ / s");
  expect(first).toMatch(/^[^,]+,within phases,\d/);

  const [picture] = await Promise.all([colleague.waitForEvent("download"), plot.getByRole("button", { name: "PNG" }).click()]);
  expect(picture.suggestedFilename()).toBe(`${code}-mdev-q.png`);
  const bytes = fs.readFileSync(await picture.path());
  expect(bytes.subarray(1, 4).toString("latin1")).toBe("PNG");
  expect(bytes.readUInt32BE(16)).toBeGreaterThan(1500);

  const phase = await row<{ sequence: number }>(`select sequence from phase where campaign_id = $1 and medium = 'air' order by sequence limit 1`, [bench.campaign.id]);
  await page.goto(`/campaigns/${code}/readings/${phase?.sequence}/2`);
  await page.getByRole("heading", { name: /^Repeat 3 of/ }).waitFor();
  await page.keyboard.press("ArrowRight");
  await page.getByRole("heading", { name: /^Repeat 4 of/ }).waitFor();
  await page.getByText(/The phase value would go from/).waitFor();
  await page.getByLabel("The rig was touched or moved").check();
  await page.getByRole("button", { name: "Leave out repeat 4" }).click();
  await page.getByText(/Left out by U. Fjell: The rig was touched or moved/).waitFor();
  await page.getByLabel("Why it counts after all").fill("It was the other bench");
  await page.getByRole("button", { name: "Take repeat 4 back in" }).click();
  await page.getByRole("button", { name: "Leave out repeat 4" }).waitFor();
});
