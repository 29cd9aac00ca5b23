import { encode } from "next-auth/jwt";
import { env } from "@/lib/env";
import { sessionCookieName } from "@/lib/people/session-cookie";
import type { Role } from "@/lib/permissions";
import { newToken } from "@/lib/tokens";
import { AccessToken } from "@/models/access-token";
import { AgentToken } from "@/models/agent-token";
import type { Person } from "@/models/person";
import { now } from "./now";
import { buildPerson } from "./person";
import { buildRig } from "./rig";

export const ORIGIN = "https://longreed.example";

/** The cookie that a signed-in browser sends. */
export async function cookieOf({ id, sessionVersion }: Pick<Person, "id" | "sessionVersion">): Promise<string> {
  return `${sessionCookieName()}=${await encode({ token: { id, sessionVersion }, secret: env().AUTH_SECRET })}`;
}

export async function tokenOf(personId: string, given: Partial<AccessToken> = {}): Promise<string> {
  const { token, hash, last4 } = newToken("person");
  await AccessToken.create({ personId, name: "script", scope: "write", tokenHash: hash, last4, createdAt: now, ...given });
  return token;
}

/** A token of a rig's agent, and the rig. */
export async function agentToken(): Promise<{ rigId: string; tokenId: string; token: string }> {
  const rig = await buildRig();
  const { token, hash, last4 } = newToken("agent");
  const { id } = await AgentToken.create({ rigId: rig.id, name: "bench computer", tokenHash: hash, last4, createdAt: now });
  return { rigId: rig.id, tokenId: id, token };
}

type Send = { cookie?: string; token?: string; body?: unknown; headers?: Record<string, string> };

/** A request as a browser (cookie) or a script (token) sends it. */
export function request(method: string, path: string, { cookie, token, body, headers = {} }: Send = {}): Request {
  const own: Record<string, string> = {};
  if (cookie) Object.assign(own, { cookie, origin: ORIGIN });
  if (token) own.authorization = `Bearer ${token}`;
  if (body !== undefined) own["content-type"] = "application/json";
  return new Request(ORIGIN + path, { method, headers: { ...own, ...headers }, body: body === undefined ? undefined : JSON.stringify(body) });
}

/** What Next.js hands to a route beside the request. */
export const at = (params: Record<string, string> = {}) => ({ params: Promise.resolve(params) });

/** A browser of a person in that role. */
export async function signedInAs(role: Role): Promise<{ person: Person; cookie: string }> {
  const person = await buildPerson({ role });
  await person.reload();
  return { person, cookie: await cookieOf(person) };
}
