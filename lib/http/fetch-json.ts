import { z } from "zod";

const problem = z.looseObject({
  type: z.string().default("about:blank"),
  title: z.string().default("The request failed"),
  status: z.number().optional(),
  detail: z.string().optional(),
  errors: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
});

/** A refusal of the server, as the browser may show it. */
export class ProblemError extends Error {
  override readonly name = "ProblemError";

  constructor(
    /** The last part of the problem's type: "lease-lost", "invalid", "not-allowed". "offline" when no answer came. */
    readonly code: string,
    readonly status: number,
    readonly title: string,
    message: string,
    readonly fields: readonly { path: string; message: string }[] = [],
    /** All members of the answer, such as `cautions`. */
    readonly members: Readonly<Record<string, unknown>> = {},
    readonly requestId?: string,
  ) {
    super(message);
  }

  get detail(): string {
    return this.message;
  }
}

type Call<A> = {
  /** The answer's schema; without it the answer is not read. */
  answer?: z.ZodType<A>;
  method?: "GET" | "POST" | "PATCH" | "PUT" | "DELETE";
  body?: unknown;
  /** Makes a POST that may be sent twice take effect once. */
  idempotencyKey?: string;
  signal?: AbortSignal;
};

/** Calls our API from the browser, cookie included. @throws ProblemError for every refusal, and when nothing answered. */
export async function fetchJson<A = undefined>(path: string, { answer, method = "GET", body, idempotencyKey, signal }: Call<A> = {}): Promise<A> {
  const headers = new Headers({ Accept: "application/json" });
  if (body !== undefined) headers.set("Content-Type", "application/json");
  if (idempotencyKey) headers.set("Idempotency-Key", idempotencyKey);

  let response: Response;
  try {
    response = await fetch(path, { method, headers, body: body === undefined ? undefined : JSON.stringify(body), signal, credentials: "same-origin" });
  } catch (error) {
    if (signal?.aborted) throw error;
    throw new ProblemError("offline", 0, "No answer", "Longreed cannot be reached. What is shown stays readable.");
  }
  if (!response.ok) throw await problemOf(response);
  return (answer ? answer.parse(response.status === 204 ? undefined : await response.json()) : undefined) as A;
}

async function problemOf(response: Response): Promise<ProblemError> {
  const requestId = response.headers.get("x-request-id") ?? undefined;
  const given = problem.safeParse(await response.json().catch(() => undefined));
  if (!given.success) return new ProblemError("unreadable", response.status, "The request failed", `The server answered ${response.status}.`, [], {}, requestId);
  const { type, title, detail, errors, ...members } = given.data;
  return new ProblemError(type.split("/").at(-1) ?? type, response.status, title, detail ?? title, errors, members, requestId);
}
