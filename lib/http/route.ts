import type { z } from "zod";
import { authenticate, type Authenticated } from "@/lib/http/authenticate";
import { checkAnswer } from "@/lib/http/check-answer";
import { idempotencyKey, once } from "@/lib/http/idempotency";
import { type Handler, withOperation } from "@/lib/http/operation";
import { problemResponse } from "@/lib/http/problem";
import { parseJson, readBody } from "@/lib/http/read-body";
import { requestIdOf, respond, type Result } from "@/lib/http/respond";
import { validate, validateParams, validateQuery } from "@/lib/http/validate";
import { demand } from "@/lib/people/actor";
import type { Permission } from "@/lib/permissions";

type Access = Permission | "public";

export type Call<Who extends Access, P, Q, B> = {
  /** The caller, checked against the database; undefined on public calls. */
  person: Who extends "public" ? undefined : Authenticated;
  params: P;
  query: Q;
  body: B;
  now: Date;
  request: Request;
  requestId: string;
};

export type RouteOptions<Who extends Access, P, Q, B, A> = {
  /** A permission of `lib/permissions.ts`; "public" for calls without a sign-in. */
  permission: Who;
  /** What the call does, in one sentence, for the reference. */
  summary: string;
  description?: string;
  /** Of the folder's `[name]` parts; one that does not fit is 404. */
  params?: z.ZodType<P>;
  /** Of the address's `?name=value`; a name given twice arrives as an array. */
  query?: z.ZodType<Q>;
  /** Of the JSON body. Without it the body is left unread for the handler to stream. */
  body?: z.ZodType<B>;
  /** Of the answer, as JSON carries it: times are ISO text. Checked outside production. */
  answer?: z.ZodType<A>;
  /** Status of a plain answer; 200 unless given. */
  status?: 200 | 201 | 202;
  /** What further statuses mean that the handler answers with by `Answer`. */
  otherwise?: Readonly<Record<number, string>>;
  /** The answer holds a secret that must not be kept with its Idempotency-Key. */
  shownOnce?: boolean;
  /** Of the fields beside the file of an upload (multipart/form-data). The handler streams the body and sees to the Idempotency-Key, as only it knows what was sent. */
  form?: z.ZodType;
  produces?: readonly string[];
  /** Plain data → JSON; `undefined` → 204; `new Answer(status, data)` → that status; a `Response` for streams. */
  handle: (call: Call<Who, P, Q, B>) => Result<NoInfer<A>> | Promise<Result<NoInfer<A>>>;
};

/**
 * Makes the handler of one call of `/api/…` for people and scripts. In this order: who (401), own Origin for cookies and
 * permission (403), address (404), query and body (400, 413, 415), Idempotency-Key of a POST (409, 422), then `handle`.
 * Errors come out as `application/problem+json`; whatever nobody foresaw is logged once and answered without detail.
 *
 *     export const POST = route({ permission: "hold campaigns", params: idParams, body: holdBody, summary: "Hold a campaign",
 *       handle: ({ person, params, body, now }) => holdCampaign({ by: person, now, campaignId: params.id, why: body.why }) });
 */
export function route<Who extends Access, P = Record<string, never>, Q = Record<string, never>, B = undefined, A = unknown>(
  options: RouteOptions<Who, P, Q, B, A>,
): Handler {
  const { permission, summary, description, params, query, body, answer, status = 200, otherwise, form, produces } = options;

  return withOperation({ summary, description, access: permission, params, query, body, answer, status, otherwise, form, produces }, async (request, context) => {
    const requestId = requestIdOf(request);
    const url = new URL(request.url);
    try {
      const now = new Date();
      const person = permission === "public" ? undefined : await admit(request, permission, now);
      const call = {
        person: person as Who extends "public" ? undefined : Authenticated,
        params: (params ? validateParams(params, await context.params) : {}) as P,
        query: (query ? validateQuery(query, url.searchParams) : {}) as Q,
        now,
        request,
        requestId,
      };
      const sent = body ? await readBody(request) : undefined;
      const parsed = (body && sent ? validate(body, parseJson(sent.text)) : undefined) as B;
      const work = async () => checkAnswer(answer, await options.handle({ ...call, body: parsed }));

      const key = request.method === "POST" && person && !form ? idempotencyKey(request) : undefined;
      const result =
        key && person
          ? await once(
              {
                personId: person.id,
                key,
                call: `POST ${url.pathname}`,
                body: sent?.bytes ?? Buffer.alloc(0),
                now,
                status,
                shownOnce: options.shownOnce ?? false,
              },
              work,
            )
          : await work();
      return respond(result, status, requestId);
    } catch (error) {
      return problemResponse(error, requestId, { method: request.method, path: url.pathname });
    }
  });
}

async function admit(request: Request, permission: Permission, now: Date): Promise<Authenticated> {
  const person = await authenticate(request, now);
  demand(person, permission);
  return person;
}
