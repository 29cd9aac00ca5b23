import { idempotencyKey, once } from "@/lib/http/idempotency";
import { route } from "@/lib/http/route";
import { acceptImport } from "@/lib/imports/accept";
import { findImports } from "@/lib/imports/read";
import { dropReceived, receiveImport } from "@/lib/imports/receive";
import { importAnswer, importFields, importPage, importQuery } from "@/lib/imports/schema";

export const GET = route({
  permission: "read",
  summary: "Imports of earlier data, the newest first",
  query: importQuery,
  answer: importPage,
  handle: ({ query, now }) => findImports({ query, now }),
});

export const POST = route({
  permission: "edit campaigns",
  summary: "Import earlier data as a finished campaign, from CSV or a workbook",
  description:
    "`multipart/form-data` with `file` (up to 512 MiB), `name`, `sensorId?`, `mapping?` and `format?` (JSON). Up to 50 000 rows answer 201, more 202 with an import to look at; a file with the same content 200. 422 names every bad row; nothing is imported then.",
  form: importFields,
  answer: importAnswer,
  status: 201,
  otherwise: { 200: "The same content was imported before; nothing was imported now", 202: "A worker imports it" },
  handle: async ({ person, now, request }) => {
    const key = idempotencyKey(request);
    const received = await receiveImport({ request, personId: person.id, now });
    const work = () => acceptImport({ by: person, received, now });
    if (key === undefined) return work();
    try {
      const body = Buffer.concat([received.sha256, Buffer.from(JSON.stringify(received.fields))]);
      return (await once({ personId: person.id, key, call: "POST /api/imports", body, now, status: 201, shownOnce: false }, work)) as Awaited<ReturnType<typeof work>>;
    } finally {
      await dropReceived(received.importRunId);
    }
  },
});
