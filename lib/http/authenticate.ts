import { decode } from "next-auth/jwt";
import { z } from "zod";
import { change, row } from "@/lib/db";
import { env } from "@/lib/env";
import { notAllowed, notSignedIn } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { demandOwnOrigin } from "@/lib/http/origin";
import type { Actor } from "@/lib/people/actor";
import { sessionCookieName } from "@/lib/people/session-cookie";
import { hashToken } from "@/lib/tokens";

export type Authenticated = Actor & { tokenId?: string };

const claims = z.object({ id: idSchema, sessionVersion: z.int() });
const reading = new Set(["GET", "HEAD", "OPTIONS"]);

/** @throws AppError 401 without a valid session or token, 403 for a mutation from elsewhere or with a reading token. */
export async function authenticate(request: Request, now: Date): Promise<Authenticated> {
  const bearer = bearerToken(request);
  if (bearer !== undefined) return personOfToken(bearer, request.method, now);

  const cookie = cookieOf(request, sessionCookieName());
  const person = cookie && (await personOfSession(cookie, now));
  if (!person) throw notSignedIn();
  if (!reading.has(request.method)) demandOwnOrigin(request);
  return person;
}

/** The token of an Authorization header, undefined without a header. */
export function bearerToken(request: Request): string | undefined {
  const header = request.headers.get("authorization");
  if (header === null) return undefined;
  const token = /^Bearer +([\w.~+/=-]+) *$/i.exec(header)?.[1];
  if (!token) throw notSignedIn("The Authorization header must be: Bearer, a space, and the token");
  return token;
}

/** The person of a session cookie, if the session is of the person's present version and the account is open. Notes, to the minute, that the person was here. */
export async function personOfSession(cookie: string, now: Date): Promise<Actor | undefined> {
  const session = claims.safeParse(await decode({ token: cookie, secret: env().AUTH_SECRET }).catch(() => null));
  if (!session.success) return undefined;
  const found = await row<Actor & { stale: boolean }>(
    `select id, name, role, seen_at is null or seen_at < $3::timestamptz - interval '1 minute' as stale
       from person where id = $1 and session_version = $2 and closed_at is null`,
    [session.data.id, session.data.sessionVersion, now],
  );
  if (!found) return undefined;
  const { stale, ...person } = found;
  if (stale) await change("update person set seen_at = $2 where id = $1", [person.id, now]);
  return person;
}

type TokenRow = Actor & { tokenId: string; scope: "read" | "write"; stale: boolean };

async function personOfToken(token: string, method: string, now: Date): Promise<Authenticated> {
  const found = await row<TokenRow>(
    `select p.id, p.name, p.role, t.id as "tokenId", t.scope,
       t.last_used_at is null or t.last_used_at < $2::timestamptz - interval '1 minute' as stale
     from access_token t join person p on p.id = t.person_id
     where t.token_hash = $1 and t.revoked_at is null and (t.expires_at is null or t.expires_at > $2) and p.closed_at is null`,
    [hashToken(token), now],
  );
  if (!found) throw notSignedIn("The token is not known, has run out or was withdrawn");
  if (found.scope === "read" && !reading.has(method)) throw notAllowed("This token may only read; make one that may write");
  if (found.stale) await change("update access_token set last_used_at = $2 where id = $1", [found.tokenId, now]);
  return { id: found.id, name: found.name, role: found.role, tokenId: found.tokenId };
}

function cookieOf(request: Request, name: string): string | undefined {
  for (const part of (request.headers.get("cookie") ?? "").split(";")) {
    const at = part.indexOf("=");
    if (at > 0 && part.slice(0, at).trim() === name) return part.slice(at + 1).trim();
  }
  return undefined;
}
