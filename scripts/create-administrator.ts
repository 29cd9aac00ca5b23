import { text } from "node:stream/consumers";
import { parseArgs } from "node:util";
import { z } from "zod";

const usage = `Makes the first administrator of a new Longreed.

  npm run create-administrator -- --email MAIL --name "FULL NAME" < file-with-the-password

The password is read from standard input, or from LONGREED_ADMINISTRATOR_PASSWORD.`;

const administrator = z.object({
  email: z.email("--email must be a mail address"),
  name: z.string("--name is missing").trim().min(1, "--name is missing"),
  password: z.string().min(12, "The password must have at least 12 characters"),
});

async function main(): Promise<void> {
  await import("./lib/env-file.mjs");
  const options = { email: { type: "string" }, name: { type: "string" }, help: { type: "boolean" } } as const;
  const { values } = parseArgs({ options });
  if (values.help || process.argv.length === 2) return console.log(usage);

  const { passwordAllowed } = await import("@/lib/env");
  const { createFirstAdministrator } = await import("@/lib/people/create-administrator");
  const { sequelize } = await import("@/lib/db");
  const password = process.env.LONGREED_ADMINISTRATOR_PASSWORD ?? (await text(process.stdin)).replace(/\r?\n$/, "");
  const given = administrator.safeParse({ ...values, password });
  if (!given.success) throw new Error(given.error.issues.map(({ message }) => message).join("\n"));
  if (!passwordAllowed(password)) throw new Error("This is the password of the demo accounts: choose another.");
  try {
    await createFirstAdministrator({ ...given.data, now: new Date() });
    console.log(`${given.data.name} can sign in as ${given.data.email}.`);
  } finally {
    await sequelize.close();
  }
}

main().catch((error: unknown) => {
  console.error(error instanceof Error ? error.message : error);
  process.exitCode = 1;
});
