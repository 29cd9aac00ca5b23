import type { ProblemCode } from "@/lib/problem-types";

/** What can go wrong in a way that the caller may be told about. Each code has one HTTP status; see `lib/http/problem.ts`. */
export type FieldError = { path: string; message: string };

type Details = {
  /** Stable code, used as the problem type. */
  code: ProblemCode;
  status: number;
  title: string;
  /** Further members of the answer, such as `errors` or `cautions`. */
  members?: Record<string, unknown>;
  retryAfterS?: number;
};

/** An error in our words. The message says what happened, what was kept, and what to do next. */
export class AppError extends Error {
  readonly code: ProblemCode;
  readonly status: number;
  readonly title: string;
  readonly members: Record<string, unknown>;
  readonly retryAfterS?: number;

  constructor(message: string, { code, status, title, members = {}, retryAfterS }: Details) {
    super(message);
    this.name = "AppError";
    this.code = code;
    this.status = status;
    this.title = title;
    this.members = members;
    this.retryAfterS = retryAfterS;
  }
}

export const invalid = (errors: FieldError[], message = errors.map(({ path, message: m }) => (path ? `${path}: ${m}` : m)).join("; ")) =>
  new AppError(message, { code: "invalid", status: 400, title: "The request is not valid", members: { errors } });

export const notSignedIn = (message = "Sign in, or send a token") =>
  new AppError(message, { code: "not-signed-in", status: 401, title: "Not signed in" });

export const notAllowed = (message: string) => new AppError(message, { code: "not-allowed", status: 403, title: "Not allowed" });

export const notFound = (what: string) => new AppError(`There is no such ${what}`, { code: "not-found", status: 404, title: "Not found" });

/** The request is fine, the present state is not. */
export const conflict = (message: string, code: ProblemCode = "conflict", members?: Record<string, unknown>) =>
  new AppError(message, { code, status: 409, title: "In conflict with the present state", members });

export const gone = (message: string) => new AppError(message, { code: "gone", status: 410, title: "No longer there" });

export const tooLarge = (message: string) => new AppError(message, { code: "too-large", status: 413, title: "Too large" });

export const unsupportedType = (message: string) =>
  new AppError(message, { code: "unsupported-type", status: 415, title: "Unsupported content type" });

/** Well-formed, but it cannot be done here. */
export const impossible = (message: string, members?: Record<string, unknown>, code: ProblemCode = "impossible") =>
  new AppError(message, { code, status: 422, title: "Not possible here", members });

export const tooMany = (message: string, retryAfterS: number) =>
  new AppError(message, { code: "too-many-requests", status: 429, title: "Too many requests", retryAfterS });

export const away = (message: string, retryAfterS = 5, members?: Record<string, unknown>) =>
  new AppError(message, { code: "unavailable", status: 503, title: "Not available for the moment", retryAfterS, members });
