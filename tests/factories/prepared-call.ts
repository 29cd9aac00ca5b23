import { EXAMPLES } from "@/lib/http/examples";
import { addressOf, API_CALLS, type ApiCall } from "./api-calls";
import { PREPARATIONS, type Prepared } from "./preparations";
import { at, ORIGIN, signedInAs } from "./session";

/** A call with all that it needs in the laboratory, so that its documented example succeeds. */
export type PreparedCall = { call: ApiCall; params: Record<string, string>; query: string; body: unknown; form?: () => FormData; headers: Record<string, string> };

type Example = { call: ApiCall; example?: unknown };

/** Makes what the example speaks of and puts the ids of this laboratory where the example has others. */
export async function prepareCall({ call, example }: Example): Promise<PreparedCall> {
  const { params = {}, ids = {}, form, query = "", headers }: Prepared = await PREPARATIONS[call.name](example);
  const inAddress = Object.fromEntries(Object.entries(params).filter(([name]) => call.path.includes(`{${name}}`)));
  return { call, params: inAddress, query, form, body: call.operation.body ? withIds(example ?? firstExample(call), ids) : undefined, headers: headers ?? { cookie: (await signedInAs("administrator")).cookie, origin: ORIGIN } };
}

/** Every call that the laboratory of the tests is prepared for; a test of its own asks for all. */
export const PREPARED_CALLS: readonly ApiCall[] = API_CALLS.filter(({ name }) => Object.hasOwn(PREPARATIONS, name));

export const firstExample = ({ name }: ApiCall): unknown => Object.values(EXAMPLES[name] ?? {})[0] ?? {};

/** What of a prepared call is sent otherwise than documented. */
export type Otherwise = { body?: BodyInit; params?: Record<string, string>; query?: string; headers?: Record<string, string | undefined> };

export function sendPrepared(prepared: PreparedCall, otherwise: Otherwise = {}): Promise<Response> {
  const { call, body } = prepared;
  const params = otherwise.params ?? prepared.params;
  const sent = otherwise.body ?? prepared.form?.() ?? (body === undefined ? undefined : JSON.stringify(body));
  const headers = new Headers(prepared.headers);
  if (sent !== undefined && !(sent instanceof FormData) && !headers.has("content-type")) headers.set("content-type", "application/json");
  for (const [name, value] of Object.entries(otherwise.headers ?? {})) {
    if (value === undefined) headers.delete(name);
    else headers.set(name, value);
  }
  const request = new Request(`${ORIGIN}${addressOf(call.path, params)}${otherwise.query ?? prepared.query}`, { method: call.method, headers, body: call.method === "GET" ? undefined : sent });
  return call.handler(request, at(params));
}

/** The example with the values at these names replaced, wherever they stand. */
function withIds(value: unknown, ids: Readonly<Record<string, unknown>>): unknown {
  if (Array.isArray(value)) return value.map((inner) => withIds(inner, ids));
  if (typeof value !== "object" || value === null) return value;
  return Object.fromEntries(Object.entries(value).map(([key, inner]) => [key, inner !== null && Object.hasOwn(ids, key) ? ids[key] : withIds(inner, ids)]));
}
