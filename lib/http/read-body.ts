import { gunzipSync } from "node:zlib";
import { AppError, invalid, tooLarge, unsupportedType, type FieldError } from "@/lib/errors";

/** After decoding. Uploads stream and do not come this way. */
export const MAX_BODY_BYTES = 8 * 1024 * 1024;

const utf8 = new TextDecoder("utf-8", { fatal: true });

/**
 * Reads a JSON body, gzip-encoded or not. Without a body the answer is an empty object, so that calls whose fields are
 * all optional need none.
 *
 * @throws AppError 400 not JSON, not UTF-8, broken gzip; 413 over 8 MiB; 415 another content type or encoding.
 */
export async function readBody(request: Request): Promise<{ bytes: Buffer; text: string }> {
  const encoding = (request.headers.get("content-encoding") ?? "identity").trim().toLowerCase();
  if (encoding !== "identity" && encoding !== "gzip") throw unsupportedType(`Content-Encoding ${encoding} is not understood; send gzip or none`);

  const sent = await readAll(request);
  if (sent.length > 0) demandJson(request.headers.get("content-type"));
  const bytes = encoding === "gzip" && sent.length > 0 ? gunzip(sent) : sent;
  try {
    return { bytes, text: utf8.decode(bytes) };
  } catch {
    throw invalid([{ path: "", message: "the body is not UTF-8" }]);
  }
}

export function parseJson(text: string): unknown {
  if (text.trim() === "") return {};
  let json: unknown;
  try {
    json = JSON.parse(text);
  } catch (error) {
    throw invalid([{ path: "", message: `the body is not JSON: ${(error as Error).message}` }]);
  }
  // Only an escape can bring in what the database cannot store: a raw one is not JSON or not UTF-8.
  if (text.includes("\\u")) refuseBadText(json);
  return json;
}

/** @throws AppError 400 for NUL characters and lone surrogates, which PostgreSQL cannot store. */
export function refuseBadText(value: unknown): void {
  const errors: FieldError[] = [];
  const waiting: { value: unknown; path: string }[] = [{ value, path: "" }];
  for (let next = waiting.pop(); next; next = waiting.pop()) {
    const { value: current, path } = next;
    if (typeof current === "string") {
      if (!storable(current)) errors.push({ path, message: "holds a NUL or half a character, which cannot be stored" });
    } else if (current && typeof current === "object") {
      for (const [key, inner] of Object.entries(current)) {
        if (!storable(key)) errors.push({ path, message: "has a name with a NUL or half a character" });
        else waiting.push({ value: inner, path: path ? `${path}.${key}` : key });
      }
    }
    if (errors.length >= 20) break;
  }
  if (errors.length > 0) throw invalid(errors);
}

const storable = (text: string) => !text.includes("\0") && !/\p{Surrogate}/u.test(text);

async function readAll(request: Request): Promise<Buffer> {
  const announced = request.headers.get("content-length");
  if (Number(announced ?? 0) > MAX_BODY_BYTES) throw overLimit();
  if (!request.body) return Buffer.alloc(0);
  try {
    // The server holds a body to its announced length, so that only one without needs to be counted as it comes.
    return announced === null ? await readCounted(request.body) : Buffer.from(await request.arrayBuffer());
  } catch (error) {
    if (error instanceof AppError) throw error;
    throw invalid([{ path: "", message: "the body ended too early" }]);
  }
}

async function readCounted(body: ReadableStream<Uint8Array>): Promise<Buffer> {
  const chunks: Uint8Array[] = [];
  let length = 0;
  const reader = body.getReader();
  for (let next = await reader.read(); !next.done; next = await reader.read()) {
    length += next.value.length;
    if (length > MAX_BODY_BYTES) {
      await reader.cancel();
      throw overLimit();
    }
    chunks.push(next.value);
  }
  return Buffer.concat(chunks, length);
}

function gunzip(sent: Buffer): Buffer {
  try {
    return gunzipSync(sent, { maxOutputLength: MAX_BODY_BYTES });
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "ERR_BUFFER_TOO_LARGE") throw overLimit();
    throw invalid([{ path: "", message: "the body is not valid gzip" }]);
  }
}

function demandJson(contentType: string | null): void {
  const [type, ...parameters] = (contentType ?? "").split(";").map((part) => part.trim().toLowerCase());
  if (!/^application\/([\w.-]+\+)?json$/.test(type ?? "")) throw unsupportedType("Send the body as application/json");
  const charset = parameters.find((parameter) => parameter.startsWith("charset="))?.slice(8).replaceAll('"', "");
  if (charset && charset !== "utf-8" && charset !== "utf8") throw unsupportedType("JSON is sent in UTF-8");
}

const overLimit = () => tooLarge(`The body is larger than ${MAX_BODY_BYTES} bytes (8 MiB after decoding). Nothing was stored; split it.`);
