import { fetchJson } from "@/lib/http/fetch-json";
import { findAnswer, type FindAnswer } from "@/lib/find/schema";

/** For the field that answers while one types. */
export const findNow = (q: string, signal: AbortSignal): Promise<FindAnswer> =>
  fetchJson(`/api/find?limit=3&${new URLSearchParams({ q: q.slice(0, 100) })}`, { answer: findAnswer, signal });
