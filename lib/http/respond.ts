/** An answer with a status of its own, for calls that answer 200, 201 or 202 by what they found. */
export class Answer<A> {
  constructor(
    readonly status: number,
    readonly data: A,
  ) {}
}

export type Result<A> = A | Answer<A> | Response | undefined | void;

/** Plain data becomes JSON, nothing becomes 204, a Response passes with our headers added. */
export function respond(result: unknown, status: number, requestId: string): Response {
  if (result instanceof Response) {
    const headers = new Headers(result.headers);
    headers.set("X-Request-Id", requestId);
    if (!headers.has("Cache-Control")) headers.set("Cache-Control", "no-store");
    return new Response(result.body, { status: result.status, statusText: result.statusText, headers });
  }
  const { status: code, data } = result instanceof Answer ? result : { status, data: result };
  const headers = { "Cache-Control": "no-store", "X-Request-Id": requestId };
  if (data === undefined) return new Response(null, { status: 204, headers });
  return new Response(JSON.stringify(data), { status: code, headers: { ...headers, "Content-Type": "application/json" } });
}

/** A request id of a proxy in front of us if it is a plain one, else a new one. */
export function requestIdOf(request: Request): string {
  const given = request.headers.get("x-request-id");
  return given && /^[\w-]{8,64}$/.test(given) ? given : crypto.randomUUID();
}
