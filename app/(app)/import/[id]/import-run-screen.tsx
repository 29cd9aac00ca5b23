"use client";

import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { LinkButton } from "@/components/ui/button";
import { PageTitle, Section } from "@/components/ui/page";
import { Empty, Loading, LongRunning, Problem } from "@/components/ui/states";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount, formatNumber, plural } from "@/lib/format";
import { formatDayTime, formatDuration } from "@/lib/format-time";
import { fetchJson } from "@/lib/http/fetch-json";
import { importRunOptions, isOpen } from "@/lib/imports/client";
import { importRunAnswer, type ImportRunAnswer } from "@/lib/imports/schema";
import { may, type Role } from "@/lib/permissions";
import { RefusedRows } from "../refused-rows";

/** Reading is so much of the work; writing and closing the phases is the rest. */
const READING = 0.15;

export function ImportRunScreen({ importRunId, role, zone }: { importRunId: string; role: Role; zone: string }) {
  const { data: run, error, refetch } = useQuery(importRunOptions(importRunId));
  if (!run) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the import" />}</Section>;
  return (
    <>
      <PageTitle crumbs={[{ label: "Import", href: "/import" }, { label: run.fileName }]} meta={`Sent by ${run.by}, ${formatDayTime(run.createdAt, zone, run.now)}, ${formatNumber(run.sizeBytes / 1e6, { decimals: 1 })}\u00a0MB`}>
        {run.name}
      </PageTitle>
      <Section head="Progress" note="All of a file is imported, or nothing. The campaign is there when the import is done.">
        <State run={run} mayCancel={may(role, "edit campaigns")} />
      </Section>
    </>
  );
}

function State({ run, mayCancel }: { run: ImportRunAnswer; mayCancel: boolean }) {
  const queries = useQueryClient();
  const cancel = useMutation({
    mutationFn: () => fetchJson(`/api/imports/${run.id}/cancel`, { method: "POST", body: {}, answer: importRunAnswer }),
    onSuccess: (after) => queries.setQueryData(importRunOptions(run.id).queryKey, after),
  });
  const { state, campaignId, rowsStored, phases, problem, startedAt, endedAt } = run;
  if (isOpen(run)) {
    return (
      <>
        <LongRunning share={shareOf(run)} secondsLeft={secondsLeft(run)} onCancel={mayCancel && !run.cancelWanted ? () => cancel.mutate() : undefined}>
          {run.cancelWanted ? "The import is being ended; what it wrote is taken back." : doing(run)}
        </LongRunning>
        {cancel.error && <Problem error={cancel.error} />}
      </>
    );
  }
  if (state === "refused" && problem) return <RefusedRows {...problem} />;
  if (state === "cancelled") return <Empty note="The file was dropped; it can be sent again." actions={<LinkButton href="/import">Import again</LinkButton>}>The import was ended before it was done. Nothing was imported.</Empty>;
  const took = startedAt && endedAt ? ` in ${formatDuration((Date.parse(endedAt) - Date.parse(startedAt)) / 1000)}` : "";
  return (
    <div className="max-w-[44em]">
      <p className="say-small">{formatCount(rowsStored)} {plural(rowsStored, "row")} became {formatCount(phases)} {plural(phases, "phase")}{took}.</p>
      <div className="buttons mt-3"><LinkButton look="primary" href={`/campaigns/${campaignCode(campaignId)}`}>Open {campaignCode(campaignId)}</LinkButton></div>
    </div>
  );
}

function doing({ state, rowsRead, rowsStored, phases }: ImportRunAnswer): string {
  if (state !== "running") return "The file waits for a worker.";
  if (phases > 0) return `Closing phases: ${formatCount(phases)} so far.`;
  return rowsStored > 0 ? `Writing: ${formatCount(rowsStored)} of ${formatCount(rowsRead)} rows.` : `Reading: ${formatCount(rowsRead)} rows so far.`;
}

function shareOf({ state, rowsRead, rowsStored, readBytes, sizeBytes }: ImportRunAnswer): number | undefined {
  if (state !== "running" || sizeBytes === 0) return undefined;
  return rowsStored > 0 && rowsRead > 0 ? READING + (1 - READING) * (rowsStored / rowsRead) : READING * (readBytes / sizeBytes);
}

function secondsLeft(run: ImportRunAnswer): number | undefined {
  const share = shareOf(run);
  if (!share || share < 0.05 || !run.startedAt) return undefined;
  return ((Date.parse(run.now) - Date.parse(run.startedAt)) / 1000) * (1 / share - 1);
}
