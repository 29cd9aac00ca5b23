import { z } from "zod";
import { listener } from "@/lib/listener";

/** Changes within this time travel together. */
const TOGETHER_MS = 200;
/** A line now and then keeps proxies from closing a quiet stream. */
const ALIVE_MS = 20_000;

export const changesQuery = z.object({
  /** After this many seconds the stream ends and the caller asks again, so that whoever may no longer sign in hears no more. */
  forS: z.coerce.number().int().min(1).max(900).default(600),
});

/**
 * Server-sent events: the names of what others have committed, such as `campaign:118` or `alarms`, never what changed in it. `*` says that
 * something may have been missed. Costs nothing while nothing happens: one listening connection a process serves all streams.
 */
export function followChanges({ forS, signal }: { forS: number; signal: AbortSignal }): Response {
  const encoder = new TextEncoder();
  let stop = () => {};
  const body = new ReadableStream<Uint8Array>({
    async start(controller) {
      const send = (text: string) => controller.enqueue(encoder.encode(text));
      const waiting = new Set<string>();
      let leaving: NodeJS.Timeout | undefined;
      const leave = () => {
        leaving = undefined;
        send(`data: ${JSON.stringify([...waiting])}\n\n`);
        waiting.clear();
      };
      const stopHearing = await listener().subscribe((topic) => {
        if (topic === "*") waiting.add("*");
        else if (topic.startsWith(CHANGED)) waiting.add(topic.slice(CHANGED.length));
        else return;
        leaving ??= setTimeout(leave, TOGETHER_MS);
      });
      const alive = setInterval(() => send(": still here\n\n"), ALIVE_MS);
      const end = () => {
        stop();
        controller.close();
      };
      const timeout = setTimeout(end, forS * 1000);
      stop = () => {
        stopHearing();
        clearTimeout(leaving);
        clearInterval(alive);
        clearTimeout(timeout);
        signal.removeEventListener("abort", end);
      };
      signal.addEventListener("abort", end);
      send("retry: 2000\n\n");
      if (signal.aborted) end();
    },
    cancel: () => stop(),
  });
  return new Response(body, { headers: { "content-type": "text/event-stream; charset=utf-8", "cache-control": "no-store, no-transform", "x-accel-buffering": "no" } });
}

const CHANGED = "changed:";
