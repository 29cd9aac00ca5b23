import { env } from "@/lib/env";

/** How long a sign-in lasts. */
export const SESSION_S = 14 * 24 * 3600;

/** Behind https the name binds the cookie to this host, so that no neighbour in the domain can plant one. */
export const sessionCookieName = (): string => (isSecure() ? "__Host-longreed-session" : "longreed-session");

export const isSecure = (): boolean => env().APP_URL.startsWith("https://");
