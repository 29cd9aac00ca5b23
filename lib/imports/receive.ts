import { createHash } from "node:crypto";
import { Readable, type Transform } from "node:stream";
import { pipeline } from "node:stream/promises";
import { createGunzip } from "node:zlib";
import busboy from "busboy";
import { change, row } from "@/lib/db";
import { AppError, invalid, tooLarge, unsupportedType } from "@/lib/errors";
import { parseJson, refuseBadText } from "@/lib/http/read-body";
import { validate } from "@/lib/http/validate";
import { importFields, type ImportFields } from "@/lib/imports/schema";

export const MOST_FILE_BYTES = 512 * 1024 * 1024;
const CHUNK = 1024 * 1024;
const FIELD_BYTES = 256 * 1024;

/** A file that stands in the database with nobody working at it yet. */
export type Received = { importRunId: string; fileName: string; sizeBytes: number; sha256: Buffer; lines: number; fields: ImportFields };

type File = Omit<Received, "fields">;

/**
 * Streams a multipart upload into the database, a megabyte at a time, and reads the fields beside the file. Nothing stays of an upload
 * that breaks off or is not as it should be.
 *
 * @throws AppError 400, 413, 415.
 */
export async function receiveImport({ request, personId, now }: { request: Request; personId: string; now: Date }): Promise<Received> {
  const texts: Record<string, string> = {};
  const files: Promise<File>[] = [];
  try {
    const parser = multipart(request);
    parser.on("field", (name, value, { valueTruncated }) => {
      texts[name] = valueTruncated ? "\0" : value;
    });
    parser.on("file", (name, stream, { filename }) => {
      if (name !== "file" || files.length > 0) {
        stream.resume();
        texts[name] = "";
        return;
      }
      // The form may end too early before anybody reads the file; whoever reads it is told then.
      stream.on("error", () => undefined);
      const file = store(stream, { fileName: filename, personId, now });
      files.push(file);
      file.catch((error: unknown) => void (parser.destroyed || parser.destroy(error as Error)));
    });
    await drain(request, parser);
    if (files.length === 0) throw invalid([{ path: "file", message: "is missing" }]);
    const [file] = await Promise.all(files);
    if (file.sizeBytes === 0) throw invalid([{ path: "file", message: "is empty" }]);
    return { ...file, fields: fieldsOf(texts) };
  } catch (error) {
    for (const result of await Promise.allSettled(files)) if (result.status === "fulfilled") await dropReceived(result.value.importRunId);
    throw error;
  }
}

/** Nothing stays of a file that was received and is not needed. */
export async function dropReceived(importRunId: string): Promise<void> {
  await change(`delete from import_run where id = $1 and state = 'receiving'`, [importRunId]);
}

/** Uploads that broke off with the process that received them. */
export async function dropAbandoned({ now }: { now: Date }): Promise<number> {
  return change(`delete from import_run where state = 'receiving' and created_at < $1::timestamptz - interval '1 day'`, [now]);
}

function multipart(request: Request): busboy.Busboy {
  const contentType = request.headers.get("content-type") ?? "";
  if (!/^multipart\/form-data\s*;/i.test(contentType)) throw unsupportedType("Send the file as multipart/form-data");
  if (Number(request.headers.get("content-length") ?? 0) > MOST_FILE_BYTES + 2 * CHUNK) throw overLimit();
  try {
    return busboy({ headers: { "content-type": contentType }, defParamCharset: "utf8", limits: { files: 2, fields: 10, parts: 12, fieldSize: FIELD_BYTES, fileSize: MOST_FILE_BYTES + 1 } });
  } catch {
    throw invalid([{ path: "", message: "the multipart body names no boundary" }]);
  }
}

async function drain(request: Request, parser: busboy.Busboy): Promise<void> {
  if (!request.body) throw invalid([{ path: "file", message: "is missing" }]);
  const encoding = (request.headers.get("content-encoding") ?? "identity").trim().toLowerCase();
  if (encoding !== "identity" && encoding !== "gzip") throw unsupportedType(`Content-Encoding ${encoding} is not understood; send gzip or none`);
  const decoding: Transform[] = encoding === "gzip" ? [createGunzip()] : [];
  try {
    await pipeline([Readable.fromWeb(request.body as Parameters<typeof Readable.fromWeb>[0]), ...decoding, parser]);
  } catch (error) {
    // What is known comes from storing; the rest is what the sender sent.
    if (error instanceof AppError || (error as { parent?: unknown }).parent !== undefined) throw error;
    throw invalid([{ path: "", message: `the multipart body cannot be read: ${(error as Error).message}` }]);
  }
}

async function store(stream: AsyncIterable<Buffer>, { fileName, personId, now }: { fileName: string | undefined; personId: string; now: Date }): Promise<File> {
  const name = (fileName ?? "").replaceAll(/[\p{Cc}/\\]/gu, "").slice(-255) || "file";
  const run = await row<{ id: string }>(
    `insert into import_run (name, file_name, mapping, format, state, created_by, created_at) values ('…', $1, '{}', '{}', 'receiving', $2, $3) returning id`,
    [name, personId, now],
  );
  const importRunId = run?.id ?? "";
  try {
    return { importRunId, fileName: name, ...(await storeChunks(importRunId, stream)) };
  } catch (error) {
    await dropReceived(importRunId);
    throw error;
  }
}

async function storeChunks(importRunId: string, stream: AsyncIterable<Buffer>): Promise<Pick<File, "sizeBytes" | "sha256" | "lines">> {
  const hash = createHash("sha256");
  let parts: Buffer[] = [];
  let waiting = 0;
  let sizeBytes = 0;
  let lines = 1;
  let n = 0;
  const flush = async () => {
    if (waiting === 0) return;
    await change(`insert into import_chunk (import_run_id, n, bytes) values ($1, $2, $3)`, [importRunId, n++, Buffer.concat(parts)]);
    parts = [];
    waiting = 0;
  };
  for await (const part of stream) {
    sizeBytes += part.length;
    if (sizeBytes > MOST_FILE_BYTES) throw overLimit();
    hash.update(part);
    for (let at = part.indexOf(10); at >= 0; at = part.indexOf(10, at + 1)) lines++;
    parts.push(part);
    waiting += part.length;
    if (waiting >= CHUNK) await flush();
  }
  await flush();
  return { sizeBytes, sha256: hash.digest(), lines };
}

function fieldsOf(texts: Readonly<Record<string, string>>): ImportFields {
  refuseBadText(texts);
  const { mapping, format, ...plain } = texts;
  const json = (path: string, text: string | undefined) => {
    if (text === undefined || text.trim() === "") return {};
    try {
      return { [path]: parseJson(text) };
    } catch (error) {
      const message = error instanceof AppError ? error.message : "is not JSON";
      throw invalid([{ path, message }]);
    }
  };
  const given = plain.sensorId === "" ? { ...plain, sensorId: undefined } : plain;
  return validate(importFields, { ...given, ...json("mapping", mapping), ...json("format", format) });
}

const overLimit = () => tooLarge(`The file is larger than ${MOST_FILE_BYTES} bytes (512 MiB). Nothing was stored; split it.`);
