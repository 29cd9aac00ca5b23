import "server-only";
import { cookies, headers } from "next/headers";
import { redirect } from "next/navigation";
import { cache } from "react";
import { personOfSession } from "@/lib/http/authenticate";
import type { Actor } from "@/lib/people/actor";
import { sessionCookieName } from "@/lib/people/session-cookie";

/** The person of this request, checked against the database once per request. */
export const personOrNull = cache(async (): Promise<Actor | null> => {
  const cookie = (await cookies()).get(sessionCookieName())?.value;
  return (cookie && (await personOfSession(cookie, new Date()))) || null;
});

/** For pages: whoever is not signed in goes to the sign-in page and comes back here afterwards. */
export async function currentPerson(): Promise<Actor> {
  const person = await personOrNull();
  if (person) return person;
  const path = (await headers()).get("x-path");
  redirect(path && path !== "/" ? `/sign-in?next=${encodeURIComponent(path)}` : "/sign-in");
}
