import { createHash, randomBytes } from "node:crypto";

export type NewToken = { token: string; hash: Buffer; last4: string };

/** What our tokens begin with, so that a person or a scanner of leaked secrets knows what was found. */
export const TOKEN_PREFIX = { agent: "lr_agent_", person: "lr_person_", invitation: "lr_invitation_", reset: "lr_reset_" } as const;

/** A token of 256 random bits. Only its hash and its last four signs are kept: it can be shown once. */
export function newToken(prefix: keyof typeof TOKEN_PREFIX): NewToken {
  const token = TOKEN_PREFIX[prefix] + randomBytes(32).toString("base64url");
  return { token, hash: hashToken(token), last4: token.slice(-4) };
}

/** SHA-256 is enough for 256 random bits; a slow hash would only slow down every request. */
export const hashToken = (token: string): Buffer => createHash("sha256").update(token).digest();
