import type { NextAuthOptions } from "next-auth";
import CredentialsProvider from "next-auth/providers/credentials";
import { z } from "zod";
import { env } from "@/lib/env";
import { AppError } from "@/lib/errors";
import { log } from "@/lib/log";
import { isSecure, SESSION_S, sessionCookieName } from "@/lib/people/session-cookie";
import { signIn } from "@/lib/people/sign-in";
import { placeOf } from "@/lib/people/throttle";
import { ROLES } from "@/lib/permissions";

const credentials = z.object({ email: z.string().max(254), password: z.string().max(200) });
const signedIn = z.object({ id: z.string(), role: z.enum(ROLES), sessionVersion: z.number() });

/** How a throttled try is told apart from a wrong password: the seconds to wait follow. */
export const TOO_MANY = "TooManyTries:";

/** The session is a signed cookie with id and session version; role and closing are read from the database each time. */
export const authOptions = (): NextAuthOptions => ({
  secret: env().AUTH_SECRET,
  session: { strategy: "jwt", maxAge: SESSION_S },
  pages: { signIn: "/sign-in", error: "/sign-in" },
  useSecureCookies: isSecure(),
  cookies: {
    sessionToken: { name: sessionCookieName(), options: { httpOnly: true, sameSite: "lax", path: "/", secure: isSecure() } },
  },
  providers: [
    CredentialsProvider({
      credentials: { email: { label: "E-mail", type: "email" }, password: { label: "Password", type: "password" } },
      async authorize(given, request) {
        const asked = credentials.safeParse(given);
        if (!asked.success) return null;
        const headers = new Headers(request.headers as Record<string, string> | undefined);
        return (await signIn({ ...asked.data, place: placeOf(headers), now: new Date() }).catch(sayWhy)) ?? null;
      },
    }),
  ],
  callbacks: {
    jwt({ token, user }) {
      const person = signedIn.safeParse(user);
      return person.success ? { ...token, ...person.data } : token;
    },
    session({ session, token }) {
      const person = signedIn.safeParse(token);
      return person.success ? { ...session, user: { ...session.user, id: person.data.id, role: person.data.role } } : session;
    },
  },
});

/** next-auth shows the message of an error to the browser: only ours may go there. */
function sayWhy(error: unknown): never {
  if (error instanceof AppError && error.status === 429) throw new Error(`${TOO_MANY}${error.retryAfterS}`);
  log.error({ err: error }, "sign-in failed");
  throw new Error("Unavailable");
}
