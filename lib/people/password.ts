import { hash, verify } from "@node-rs/argon2";
import { passwordAllowed } from "@/lib/env";
import { invalid } from "@/lib/errors";
import { fieldErrors } from "@/lib/http/validate";
import { passwordSchema } from "@/lib/people/schema";

/** Argon2id with the parameters of OWASP ASVS 5.0, appendix C: 19 MiB, two passes, one lane; about 50 ms. */
const PARAMETERS = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

/** @throws AppError 400 for a password that is too short, or known to every reader of the manual. */
export async function hashPassword(password: string): Promise<string> {
  const checked = passwordSchema.safeParse(password);
  if (!checked.success) throw invalid(fieldErrors(checked.error).map(({ message }) => ({ path: "password", message })));
  if (!passwordAllowed(password)) throw invalid([{ path: "password", message: "is the password of the demo accounts: choose another" }]);
  return hash(password, PARAMETERS);
}

let decoy: Promise<string> | undefined;

/**
 * Whether the password is the one behind the hash. Without a hash (no such address, closed, never set) it takes as long and
 * says no, so that the time of the answer does not tell which addresses are known.
 */
export async function passwordMatches(passwordHash: string | null | undefined, password: string): Promise<boolean> {
  const against = passwordHash ?? (await (decoy ??= hash(crypto.randomUUID(), PARAMETERS)));
  const matches = await verify(against, password);
  return matches && passwordHash != null;
}
