import type { z } from "zod";
import { change, row } from "@/lib/db";
import { notSignedIn } from "@/lib/errors";
import { bearerToken } from "@/lib/http/authenticate";
import { checkAnswer } from "@/lib/http/check-answer";
import { type Handler, withOperation } from "@/lib/http/operation";
import { problemResponse } from "@/lib/http/problem";
import { parseJson, readBody } from "@/lib/http/read-body";
import { requestIdOf, respond, type Result } from "@/lib/http/respond";
import { validate, validateParams } from "@/lib/http/validate";
import { hashToken } from "@/lib/tokens";

export type Agent = { rigId: string; rigName: string; tokenId: string };

export type AgentCall<P, B> = {
  agent: Agent;
  /** The `Agent-Session` header, if it was sent. */
  session?: string;
  params: P;
  body: B;
  now: Date;
  /** `request.signal` tells when a long poll's client has gone. */
  request: Request;
  requestId: string;
};

export type AgentRouteOptions<P, B, A> = {
  summary: string;
  description?: string;
  params?: z.ZodType<P>;
  /** Of the JSON body; give this, or `parse` with `contract`. */
  body?: z.ZodType<B>;
  /** Reads the parsed JSON by hand, for hot calls; throws `invalid([{ path, message }])`. */
  parse?: (json: unknown) => B;
  /** What the reference shows where `parse` takes the place of `body`. */
  contract?: z.ZodType;
  answer?: z.ZodType<A>;
  status?: 200 | 201 | 202;
  /** As in `route`: plain data → JSON, `undefined` → 204, `Answer`, `Response`. */
  handle: (call: AgentCall<P, B>) => Result<NoInfer<A>> | Promise<Result<NoInfer<A>>>;
};

/**
 * Makes the handler of one call of `/api/agent/…`. The agent's token names its rig (401 when it is unknown or withdrawn, or
 * the rig is retired); then address (404) and body (400, 413, 415), then `handle`.
 *
 *     export const POST = agentRoute({ summary: "Ask for the next step", body: nextBody, answer: issuedStep,
 *       handle: ({ agent, session, body, now, request }) => nextStep({ agent, session, now, waitS: body.waitS, signal: request.signal }) });
 */
export function agentRoute<P = Record<string, never>, B = undefined, A = unknown>(options: AgentRouteOptions<P, B, A>): Handler {
  const { summary, description, params, body, parse, contract, answer, status = 200 } = options;

  return withOperation({ summary, description, access: "agent", params, body: contract ?? body, answer, status }, async (request, context) => {
    const requestId = requestIdOf(request);
    try {
      const now = new Date();
      const agent = await agentOf(request, now);
      const sent = body || parse ? parseJson((await readBody(request)).text) : undefined;
      const result = await options.handle({
        agent,
        session: request.headers.get("agent-session") ?? undefined,
        params: (params ? validateParams(params, await context.params) : {}) as P,
        body: (parse ? parse(sent) : body ? validate(body, sent) : undefined) as B,
        now,
        request,
        requestId,
      });
      return respond(checkAnswer(answer, result), status, requestId);
    } catch (error) {
      return problemResponse(error, requestId, { method: request.method, path: new URL(request.url).pathname });
    }
  });
}

async function agentOf(request: Request, now: Date): Promise<Agent> {
  const token = bearerToken(request);
  if (token === undefined) throw notSignedIn("Send the rig's agent token as Authorization: Bearer");
  const found = await row<Agent & { stale: boolean }>(
    `select r.id as "rigId", r.name as "rigName", t.id as "tokenId",
       t.last_used_at is null or t.last_used_at < $2::timestamptz - interval '1 minute' as stale
     from agent_token t join rig r on r.id = t.rig_id
     where t.token_hash = $1 and t.revoked_at is null and r.retired_at is null`,
    [hashToken(token), now],
  );
  if (!found) throw notSignedIn("The agent token is not known or was withdrawn, or its rig is retired");
  if (found.stale) await change("update agent_token set last_used_at = $2 where id = $1", [found.tokenId, now]);
  return { rigId: found.rigId, rigName: found.rigName, tokenId: found.tokenId };
}
