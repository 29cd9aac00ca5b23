"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import Link from "next/link";
import { useRouter } from "next/navigation";
import { useMemo, useState } from "react";
import { Button } from "@/components/ui/button";
import { Field, SelectField, TextField } from "@/components/ui/field";
import { PageSentence, Section } from "@/components/ui/page";
import { LongRunning, Problem } from "@/components/ui/states";
import { campaignCode } from "@/lib/campaigns/code";
import { ProblemError } from "@/lib/http/fetch-json";
import { sendFile, type ToSend } from "@/lib/imports/client";
import { suggestMapping } from "@/lib/imports/columns-of";
import { previewOf } from "@/lib/imports/preview";
import { formatSchema, type Format, type Mapping } from "@/lib/imports/schema";
import { suggestFormat } from "@/lib/imports/suggest-format";
import { ColumnsTable } from "./columns-table";
import { FormatFields } from "./format-fields";
import { ImportsTable } from "./imports-table";
import { Layouts } from "./layouts";
import { PreviewTable } from "./preview-table";
import { RefusedRows } from "./refused-rows";
import { useBeginning } from "./use-beginning";

type Props = { sensors: readonly { id: string; serial: string }[]; zone: string; now: string };

/** Choose a file, say what its columns are, look at the first rows, import. */
export function ImportScreen({ sensors, zone, now }: Props) {
  const router = useRouter();
  const queries = useQueryClient();
  const [file, setFile] = useState<File>();
  const [name, setName] = useState("");
  const [sensorId, setSensorId] = useState("");
  const [format, setFormat] = useState<Format>(() => formatSchema.parse({ timeZone: zone }));
  const [chosen, setChosen] = useState<{ header: string; mapping: Mapping }>();
  const [share, setShare] = useState(0);
  const [suggestedFor, setSuggestedFor] = useState<File>();
  const { beginning, problem, reading } = useBeginning(file, format);

  const header = beginning?.header.cells.join("\n") ?? "";
  const mapping = useMemo(() => (chosen?.header === header ? chosen.mapping : wholeMapping(beginning?.header.cells ?? [])), [chosen, header, beginning]);
  const preview = useMemo(
    () => (beginning && formatSchema.safeParse(format).success ? previewOf(beginning, { mapping, format, now: new Date(now) }) : undefined),
    [beginning, mapping, format, now],
  );
  if (beginning && file && suggestedFor !== file) {
    setSuggestedFor(file);
    setFormat({ ...format, ...suggestFormat(beginning, mapping, new Date(now)) });
  }
  const has = (...fields: string[]) => Object.values(mapping).some((use) => use && fields.includes(use.field));

  const send = useMutation({
    mutationFn: (given: ToSend) => sendFile(given, setShare),
    onSuccess: async (answer) => {
      await queries.invalidateQueries({ queryKey: ["imports"] });
      if ("importRunId" in answer) router.push(`/import/${answer.importRunId}`);
      else if (!answer.alreadyImported) router.push(`/campaigns/${campaignCode(answer.campaignId)}`);
    },
  });
  const known = send.data && "alreadyImported" in send.data && send.data.alreadyImported ? send.data.campaignId : undefined;
  const why = !file ? "no file is chosen" : name.trim() === "" ? "it has no name" : !preview ? "the file cannot be read" : preview.errors.length > 0 ? "the first rows cannot be read so" : null;

  return (
    <>
      <PageSentence>Bring earlier data in: it becomes a finished campaign.</PageSentence>
      <Section head="File" note="A table with one repeat or one raw sweep a row, as CSV or as the first sheet of a workbook (.xlsx), up to 512 MiB. The same file twice is recognised." controls={<Layouts />}>
        <div className="grid max-w-[60em] gap-4 sm:grid-cols-2 lg:grid-cols-3">
          <Field label="File" error={problem && `This file cannot be read: ${problem}.`}>
            {(bound) => (
              <input
                {...bound}
                type="file"
                accept=".csv,.txt,.tsv,.dat,.xlsx,text/csv"
                className="control py-1.5"
                onChange={({ target }) => {
                  const next = target.files?.[0];
                  setFile(next);
                  send.reset();
                  if (next && name.trim() === "") setName(next.name.replace(/\.\w{1,5}$/, ""));
                }}
              />
            )}
          </Field>
          <TextField label="Name of the campaign" maxLength={200} value={name} onChange={({ target }) => setName(target.value)} />
          <SelectField label="Sensor" hint="May be left out" value={sensorId} onChange={({ target }) => setSensorId(target.value)}>
            <option value="">not recorded here</option>
            {sensors.map(({ id, serial }) => <option key={id} value={id}>{serial}</option>)}
          </SelectField>
        </div>
        {reading && <p className="small mt-2 text-ink2" role="status">Reading the first rows.</p>}
      </Section>
      {file && (beginning || problem) && (
        <Section head="How it is written" note="What the file shows by itself is found; the rest is yours to say.">
          <FormatFields format={format} onFormat={setFormat} needsMedium={!has("medium")} raw={has("frequencyHz", "startHz")} />
        </Section>
      )}
      {beginning && (
        <Section head="Columns" note="What each column is, and in which unit. Guessed from their names; look at it.">
          <ColumnsTable beginning={beginning} mapping={mapping} onMapping={(next) => setChosen({ header, mapping: next })} />
        </Section>
      )}
      {beginning && preview && (
        <Section head="Preview" note="The first rows as they will be imported. Phases are runs of equal medium and cycle, split at gaps over five times the usual spacing.">
          <PreviewTable preview={preview} beginning={beginning} />
        </Section>
      )}
      {file && (
        <Section head="Import">
          {send.isPending ? (
            <LongRunning share={share < 1 ? share : undefined}>{share < 1 ? "The file is being sent; stay on this page until it has left." : "The rows are being checked and written."}</LongRunning>
          ) : (
            <div className="buttons">
              <Button look="primary" notPossible={why} onClick={() => send.mutate({ file, name: name.trim(), sensorId: sensorId || undefined, mapping, format })}>Import</Button>
            </div>
          )}
          {known && <p className="say-small mt-3" role="status">This file was imported before, as <Link href={`/campaigns/${campaignCode(known)}`}>{campaignCode(known)}</Link>. Nothing was imported now.</p>}
          {send.error && <div className="mt-3">{isRefusal(send.error) ? <RefusedRows again={false} detail={send.error.message} errors={send.error.fields} errorCount={Number(send.error.members.errorCount ?? send.error.fields.length)} /> : <Problem error={send.error} />}</div>}
        </Section>
      )}
      <Section head="Imports so far">
        <ImportsTable zone={zone} />
      </Section>
    </>
  );
}

const isRefusal = (error: Error): error is ProblemError => error instanceof ProblemError && error.fields.length > 0;

/** Every column with what its name speaks for, so that what is left out is left out by a person. */
function wholeMapping(header: readonly string[]): Mapping {
  const suggested = suggestMapping(header);
  return Object.fromEntries(header.map((name) => name.trim()).filter((name) => name !== "").map((name) => [name, suggested[name] ?? null]));
}
