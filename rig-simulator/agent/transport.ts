import { gzip } from "node:zlib";
import { promisify } from "node:util";
import { linkedController } from "../linked-controller";

const compress = promisify(gzip);
const worthCompressing = 2048;

export type Request = { path: string; body: string; session?: string; signal?: AbortSignal };
export type Answer = { status: number; body: unknown; retryAfterS?: number };
export type Transport = (request: Request) => Promise<Answer>;

/** The request got no answer: whether it arrived is unknown. */
export class NoAnswer extends Error {
  constructor(cause: unknown) {
    super(cause instanceof Error ? cause.message : String(cause), { cause });
    this.name = "NoAnswer";
  }
}

/** Posts JSON with the agent's token; larger bodies travel gzip-encoded at level 1. */
export function httpTransport({ url, token }: { url: string; token: string }): Transport {
  const base = url.replace(/\/+$/, "");
  return async ({ path, body, session, signal }) => {
    const headers: Record<string, string> = { authorization: `Bearer ${token}`, "content-type": "application/json" };
    if (session) headers["agent-session"] = session;
    const large = body.length > worthCompressing;
    if (large) headers["content-encoding"] = "gzip";
    const payload = large ? new Uint8Array(await compress(body, { level: 1 })) : body;
    const { controller, unlink } = linkedController(signal);
    try {
      const response = await fetch(`${base}${path}`, { method: "POST", headers, body: payload, signal: controller.signal });
      const text = await response.text();
      const retryAfterS = Number(response.headers.get("retry-after") ?? Number.NaN);
      return {
        status: response.status,
        body: parse(text),
        retryAfterS: Number.isFinite(retryAfterS) ? retryAfterS : undefined,
      };
    } catch (error) {
      if (signal?.aborted) throw signal.reason;
      throw new NoAnswer(error);
    } finally {
      unlink();
    }
  };
}

function parse(text: string): unknown {
  if (!text) return undefined;
  try {
    return JSON.parse(text) as unknown;
  } catch {
    return { detail: text.slice(0, 200) };
  }
}
