import { RateLimiterMemory, RateLimiterRes } from "rate-limiter-flexible";
import { tooMany } from "@/lib/errors";

const WINDOW_S = 15 * 60;

/**
 * Failures in 15 minutes. Per account and place it stops guessing without locking the person out elsewhere; per account it
 * holds even if the place is forged; per place it stops trying one password on many accounts.
 */
const limiters = {
  pair: new RateLimiterMemory({ points: 10, duration: WINDOW_S }),
  account: new RateLimiterMemory({ points: 50, duration: WINDOW_S }),
  place: new RateLimiterMemory({ points: 100, duration: WINDOW_S }),
};

/** Counts a try before it is judged, so that many at once cannot slip through. @throws AppError 429 */
export async function countTry({ account, place }: { account: string; place: string }): Promise<void> {
  try {
    await limiters.place.consume(place);
    await limiters.account.consume(account);
    await limiters.pair.consume(`${account} ${place}`);
  } catch (refused) {
    if (!(refused instanceof RateLimiterRes)) throw refused;
    const seconds = Math.max(1, Math.ceil(refused.msBeforeNext / 1000));
    throw tooMany(`Too many tries. Wait ${Math.ceil(seconds / 60)} min, then try again.`, seconds);
  }
}

/** A success takes its own tries back. */
export async function forgiveTries({ account, place }: { account: string; place: string }): Promise<void> {
  await Promise.all([limiters.pair.delete(`${account} ${place}`), limiters.account.reward(account), limiters.place.reward(place)]);
}

/** Where a request comes from, as the nearest proxy says. */
export const placeOf = (headers: { get(name: string): string | null }): string => headers.get("x-forwarded-for")?.split(",").at(-1)?.trim() || "here";
