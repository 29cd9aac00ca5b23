import type { z } from "zod";

/** What the reference (`/api/openapi.json`) says about one call, from the very schemas that validate it. */
export type Operation = {
  summary: string;
  description?: string;
  /** Who may call: a permission of the table, everybody, or a rig agent. */
  access: string;
  params?: z.ZodType;
  query?: z.ZodType;
  body?: z.ZodType;
  answer?: z.ZodType;
  status: number;
  /** What further statuses mean that the call answers with, its answer being the same. */
  otherwise?: Readonly<Record<number, string>>;
  /** Fields beside the `file` of an upload, which is multipart/form-data. */
  form?: z.ZodType;
  /** Further media types of the answer. */
  produces?: readonly string[];
};

type RouteContext = { params: Promise<Record<string, string | string[] | undefined>> };

/** A handler as Next.js calls it; it carries its operation, which the reference reads from the modules of all routes. */
export type Handler = ((request: Request, context: RouteContext) => Promise<Response>) & { operation: Operation };

export const withOperation = (operation: Operation, handler: (request: Request, context: RouteContext) => Promise<Response>): Handler =>
  Object.assign(handler, { operation });
