import { afterAll, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { aCampaign } from "../factories/upload";
import { account, browserOfTests, signIn } from "./browser";

const browser = browserOfTests();
afterAll(() => sequelize.close());

const twoDigits = (n: number) => String(n).padStart(2, "0");

/** As an old program of a German laboratory wrote it. */
function oldFile(): string {
  const rows = aCampaign({ cycles: 5, repeats: 24, begin: "2024-02-05T07:00:00Z" }).map(({ takenAt, medium, f0Hz, q, temperatureC = 20 }) => {
    const at = new Date(takenAt);
    const time = `${twoDigits(at.getUTCDate())}.${twoDigits(at.getUTCMonth() + 1)}.${at.getUTCFullYear()} ${takenAt.slice(11, 19)}`;
    return [time, medium, f0Hz / 1000, q, temperatureC + 273.15].join(";").replaceAll(".", ",").replace(/^(\d\d),(\d\d),/, "$1.$2.");
  });
  return ["Zeit;Medium;f0 (kHz);Q;T (K)", ...rows].join("\n");
}

test("a file of an old program becomes a campaign, and the same file again is recognised", async () => {
  const page = await browser.open();
  await signIn(page, await account("researcher", "I. Marchetti"));
  await page.goto("/import");
  const file = { name: "kampagne 2024.csv", mimeType: "text/csv", buffer: Buffer.from(oldFile()) };
  await page.locator("input[type=file]").setInputFiles(file);

  await page.getByText("The first 200 rows read well.").waitFor();
  expect(await page.getByLabel("Name of the campaign").inputValue()).toBe("kampagne 2024");
  expect(await page.getByLabel("Times are written as").inputValue()).toBe("dayFirst");
  expect(await page.getByLabel("Unit of T (K)").inputValue()).toBe("K");
  await page.getByLabel("Unit of f0 (kHz)").selectOption("Hz");
  await page.getByText("2.400 00").first().waitFor();
  await page.getByLabel("Unit of f0 (kHz)").selectOption("kHz");
  await page.getByLabel("Decimal sign").selectOption(".");
  await page.getByText(/cells of the first 200 rows cannot be read so/).waitFor();
  await page.getByText(/is the comma its decimal sign\?/).first().waitFor();
  await page.getByLabel("Decimal sign").selectOption(",");

  await page.getByRole("button", { name: "Import", exact: true }).click();
  await page.waitForURL(/\/campaigns\/C-\d+$/);
  const campaign = page.url();
  await page.getByRole("heading", { name: "kampagne 2024" }).waitFor();
  await page.getByText("Imported 240 readings of air, Water in 10 phases").waitFor();
  expect(await page.getByRole("button", { name: /^(Pause|Stop|Go on|Set aside|Take over)$/ }).count()).toBe(0);

  await page.goto("/import");
  await page.locator("input[type=file]").setInputFiles(file);
  await page.getByText("The first 200 rows read well.").waitFor();
  await page.getByRole("button", { name: "Import", exact: true }).click();
  await page.getByText("This file was imported before").waitFor();
  expect(campaign.endsWith(await page.getByRole("status").getByRole("link", { name: /^C-\d+$/ }).innerText())).toBe(true);
});
