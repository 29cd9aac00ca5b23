import { inTransaction, row, sequelize } from "@/lib/db";
import { conflict } from "@/lib/errors";
import { insertPerson } from "@/lib/people/create-person";
import { hashPassword } from "@/lib/people/password";
import { presentPerson } from "@/lib/people/present";
import type { PersonAnswer } from "@/lib/people/schema";

/** The administrator of a new Longreed, who then invites the others. @throws AppError 409 once there is one. */
export async function createFirstAdministrator({ email, name, password, now }: { email: string; name: string; password: string; now: Date }): Promise<PersonAnswer> {
  const passwordHash = await hashPassword(password);
  return inTransaction(async (transaction) => {
    await sequelize.query("lock table person in share row exclusive mode", { transaction });
    if (await row("select 1 as one from person where role = 'administrator'", [], transaction)) {
      throw conflict("There is an administrator already, who can invite others");
    }
    return presentPerson(await insertPerson(transaction, { by: "longreed", now, email, name, role: "administrator", passwordHash }));
  });
}
