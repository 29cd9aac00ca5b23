import NextAuth from "next-auth";
import { env } from "@/lib/env";
import { authOptions, TOO_MANY } from "@/lib/people/auth-options";

type Context = { params: Promise<{ nextauth: string[] }> };

async function answer(request: Request, context: Context): Promise<Response> {
  process.env.NEXTAUTH_URL ??= env().APP_URL;
  const response: Response = await NextAuth(authOptions())(request, context);
  const waitS = await secondsToWait(response);
  if (waitS === undefined) return response;
  const headers = new Headers(response.headers);
  headers.set("Retry-After", waitS);
  return new Response(response.body, { status: 429, headers });
}

/** next-auth says 401 to every refused try; one that was throttled is 429. */
async function secondsToWait(response: Response): Promise<string | undefined> {
  if (response.status !== 401) return undefined;
  const text = decodeURIComponent(await response.clone().text());
  return text.split(TOO_MANY)[1]?.match(/^\d+/)?.[0];
}

export { answer as GET, answer as POST };
