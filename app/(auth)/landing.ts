import { fetchJson } from "@/lib/http/fetch-json";
import { meAnswer } from "@/lib/people/schema";
import type { Role } from "@/lib/permissions";

/** Up to this the look is that of a phone (`phone` in tailwind.config.ts). */
const PHONE = "(max-width: 720px)";

/** Where a person lands who asked for no page in particular: an operator on a phone at the tasks. */
export const landingOf = (role: Role, onPhone: boolean): string => (role === "operator" && onPhone ? "/tasks" : "/");

/** The page that was asked for before the sign-in, or the first one of whoever has just signed in. */
export async function firstPage(next = "/"): Promise<string> {
  if (next !== "/") return next;
  const me = await fetchJson("/api/me", { answer: meAnswer }).catch(() => undefined);
  return me ? landingOf(me.role, window.matchMedia(PHONE).matches) : next;
}
