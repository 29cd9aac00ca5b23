import { AppError, away, conflict, impossible } from "@/lib/errors";
import { log } from "@/lib/log";

/** The error as its caller may see it; undefined when we did not foresee it. */
export function knownError(error: unknown): AppError | undefined {
  if (error instanceof AppError) return error;
  if (!(error instanceof Error)) return undefined;
  if (isAway(error)) return away("The database cannot be reached for the moment. Nothing was changed; try again.");

  switch (sqlState(error)) {
    case "23505":
    case "23P01":
      return conflict("There is one like this already. Nothing was changed.", "exists", { constraint: constraintOf(error) });
    case "23503":
      return conflict("It refers to something that does not exist, or something else still refers to it. Nothing was changed.", "reference", {
        constraint: constraintOf(error),
      });
    case "23001":
      return conflict("This is a record: it is never changed or deleted.", "record");
    case "40001":
    case "40P01":
      return away("Two changes met. Nothing was changed; try again.", 1);
    case "23514":
    case "22003":
    case "22007":
    case "22008":
    case "22P02":
      return impossible("A value is outside of what can be stored. Nothing was changed.", { constraint: constraintOf(error) });
    default:
      return undefined;
  }
}

/** RFC 9457. An error that we did not foresee is logged once, here, and answered without detail. */
export function problemResponse(error: unknown, requestId: string, about: { method: string; path: string }): Response {
  const known = knownError(error);
  if (!known) log.error({ err: error, requestId, ...about }, "request failed");
  if (known?.status === 503) log.warn({ err: error, requestId, ...about }, "not available");

  const { code, status, title, message, members, retryAfterS } = known ?? unforeseen(requestId);
  const headers = new Headers({ "Content-Type": "application/problem+json", "Cache-Control": "no-store", "X-Request-Id": requestId });
  if (retryAfterS !== undefined) headers.set("Retry-After", String(retryAfterS));
  if (status === 401) headers.set("WWW-Authenticate", "Bearer");
  return new Response(JSON.stringify({ type: `/problems/${code}`, title, status, detail: message, ...members }), { status, headers });
}

const unforeseen = (requestId: string) =>
  new AppError(`Longreed failed to answer. The log has the reason under ${requestId}.`, {
    code: "internal",
    status: 500,
    title: "An error of Longreed itself",
    members: { requestId },
  });

type DatabaseFault = { code?: unknown; constraint?: unknown };

function faultOf(error: Error): DatabaseFault {
  for (const key of ["original", "parent", "cause"] as const) {
    const inner = (error as { [K in typeof key]?: unknown })[key];
    if (inner && typeof inner === "object" && "code" in inner) return inner;
  }
  return error as DatabaseFault;
}

function sqlState(error: Error): string | undefined {
  const { code } = faultOf(error);
  return typeof code === "string" ? code : undefined;
}

function constraintOf(error: Error): string | undefined {
  const { constraint } = faultOf(error);
  return typeof constraint === "string" ? constraint : undefined;
}

/** Connection refused or lost, the server starting or stopping, too many connections, no free one in our pool. */
function isAway(error: Error): boolean {
  if (/^Sequelize(Connection|Host|AccessDenied|InvalidConnection)/.test(error.name)) return true;
  const state = sqlState(error);
  if (state && /^(08|57P0|53300)/.test(state)) return true;
  if (state && ["ECONNREFUSED", "ECONNRESET", "EPIPE", "ETIMEDOUT", "ENOTFOUND"].includes(state)) return true;
  return /Connection terminated|Client has encountered a connection error|timeout exceeded when trying to connect/.test(error.message);
}
