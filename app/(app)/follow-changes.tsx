"use client";

import { useQueryClient, type QueryClient } from "@tanstack/react-query";
import { useEffect } from "react";
import { keysChangedBy } from "@/lib/changed-keys";

/** The same is asked for again at most this often, however often it changes. */
const RESTING_MS = 1500;
const NAME = "longreed changes";

/**
 * Asks again for what others have changed, as soon as they have. One tab of a browser holds the stream and tells the others: a browser opens
 * only six connections to a server, and each tab needs one to work with.
 */
export function FollowChanges() {
  const queries = useQueryClient();
  useEffect(() => {
    const ending = new AbortController();
    const refresh = refresher(queries, ending.signal);
    const channel = new BroadcastChannel(NAME);
    channel.onmessage = ({ data }: MessageEvent<string[]>) => refresh(data);
    const hear = (names: string[]) => {
      refresh(names);
      channel.postMessage(names);
    };
    void navigator.locks?.request(NAME, { signal: ending.signal }, () => hold(hear, ending.signal)).catch(() => undefined);
    return () => {
      ending.abort();
      channel.close();
    };
  }, [queries]);
  return null;
}

/** Holds the stream as long as the tab lives; the browser opens it again by itself when it breaks. */
function hold(hear: (names: string[]) => void, signal: AbortSignal): Promise<void> {
  return new Promise((resolve) => {
    if (signal.aborted) return resolve();
    const stream = new EventSource("/api/changes");
    let broken = false;
    stream.onopen = () => {
      if (broken) hear(["*"]);
      broken = false;
    };
    stream.onerror = () => {
      broken = true;
    };
    stream.onmessage = ({ data }: MessageEvent<string>) => hear(JSON.parse(data) as string[]);
    signal.addEventListener("abort", () => {
      stream.close();
      resolve();
    });
  });
}

function refresher(queries: QueryClient, signal: AbortSignal): (names: string[]) => void {
  const restsUntil = new Map<string, number>();
  const ask = (key: readonly string[]) => {
    const name = key.join(" ");
    const now = performance.now();
    const leftMs = (restsUntil.get(name) ?? 0) - now;
    if (leftMs > RESTING_MS) return;
    restsUntil.set(name, Math.max(now, now + leftMs) + RESTING_MS);
    setTimeout(() => signal.aborted || void queries.invalidateQueries({ queryKey: key }), Math.max(0, leftMs));
  };
  return (names) => {
    if (names.includes("*")) void queries.invalidateQueries();
    else for (const key of names.flatMap(keysChangedBy)) ask(key);
  };
}
