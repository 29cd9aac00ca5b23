import { chromium, type Browser, type BrowserContext, type Page } from "playwright-core";
import { afterAll, beforeAll, inject } from "vitest";
import { hashPassword } from "@/lib/people/password";
import type { Role } from "@/lib/permissions";
import { Person } from "@/models/person";

const FLAGS = [
  "--no-sandbox",
  "--disable-gpu",
  "--disable-quic",
  "--no-first-run",
  "--disable-background-networking",
  "--disable-component-update",
  "--disable-sync",
  "--disable-dev-shm-usage",
];

export const PASSWORD = "a password of the tests";

/** One Chromium for a test file. */
export function browserOfTests(): { open: (options?: { phone?: boolean; dark?: boolean }) => Promise<Page> } {
  const { appUrl, chromium: executablePath } = inject("laboratory");
  let browser: Browser;
  const contexts: BrowserContext[] = [];
  beforeAll(async () => {
    browser = await chromium.launch({ executablePath, args: FLAGS });
  });
  afterAll(async () => {
    for (const context of contexts) await context.close();
    await browser?.close();
  });
  return {
    async open({ phone = false, dark = false } = {}) {
      const context = await browser.newContext({
        baseURL: appUrl,
        viewport: phone ? { width: 390, height: 844 } : { width: 1440, height: 900 },
        hasTouch: phone,
        colorScheme: dark ? "dark" : "light",
        locale: "en-GB",
        timezoneId: "Europe/Berlin",
      });
      contexts.push(context);
      context.setDefaultTimeout(30_000);
      return context.newPage();
    },
  };
}

/** An account of the role in the laboratory's database. */
export async function account(role: Role, name: string): Promise<{ email: string; name: string; id: string }> {
  const email = `${name.toLowerCase().replaceAll(/[^a-z]+/g, ".")}@longreed.example`;
  const person = await Person.create({ email, name, role, passwordHash: await hashPassword(PASSWORD), createdAt: new Date() });
  return { email, name, id: person.id };
}

/** Signs in through the page, as a person does. */
export async function signIn(page: Page, { email }: { email: string }): Promise<void> {
  await page.goto("/sign-in");
  await page.getByLabel("E-mail").fill(email);
  await page.getByLabel("Password", { exact: true }).fill(PASSWORD);
  await page.getByRole("button", { name: "Sign in", exact: true }).click();
  await page.waitForURL((url) => !url.pathname.startsWith("/sign-in"));
}
