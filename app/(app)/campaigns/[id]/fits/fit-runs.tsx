"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import Link from "next/link";
import { useMemo, useState } from "react";
import { toast } from "sonner";
import { Button } from "@/components/ui/button";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { ConfirmDialog } from "@/components/ui/dialog";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { campaignCode } from "@/lib/campaigns/code";
import type { FitRunAnswer } from "@/lib/fit-runs/schema";
import { formatCount, plural } from "@/lib/format";
import { formatRecent } from "@/lib/format-time";
import { fetchJson } from "@/lib/http/fetch-json";
import { may, type Role } from "@/lib/permissions";

type FitRunsProps = { campaign: CampaignAnswer; runs: readonly FitRunAnswer[]; role: Role; comparedId?: string };

/** The runs, the newest first, with how far each is and what can be done with it. */
export function FitRuns({ campaign, runs, role, comparedId }: FitRunsProps) {
  const [asking, setAsking] = useState<FitRunAnswer>();
  const queries = useQueryClient();
  const verb = useMutation({
    mutationFn: ({ id, act }: { id: string; act: "cancel" | "make-current" }) => fetchJson(`/api/fit-runs/${id}/${act}`, { method: "POST", body: {} }),
    onSuccess: async (_answer, { id, act }) => {
      setAsking(undefined);
      toast(act === "cancel" ? `Fit run ${id} was given up; what it has stays.` : `Fit run ${id} is current.`);
      await queries.invalidateQueries({ queryKey: ["campaigns"] });
    },
  });
  const columns = useMemo(() => columnsFor({ campaign, role, comparedId, onCancel: ({ id }) => verb.mutate({ id, act: "cancel" }), onMakeCurrent: setAsking }), [campaign, role, comparedId, verb]);
  return (
    <>
      <DataTable label="Fit runs" columns={columns} rows={runs} rowKey={({ id }) => id} selectedKey={comparedId} />
      {verb.error && !asking && <p role="alert" className="small mt-2">{verb.error.message}</p>}
      {asking && (
        <ConfirmDialog
          open
          onOpenChange={(open) => !open && setAsking(undefined)}
          title={`Make fit run ${asking.id} current?`}
          cost={
            <>
              Pages, limits and exports of {campaignCode(campaign.id)} then use it. Decisions already made stay as they are.
              {asking.found.length > 0 && ` It breaks ${formatCount(asking.found.length)} ${plural(asking.found.length, "limit")}; what was not told before becomes an alarm, found on refit: ${asking.found.map(({ text }) => text).join("; ")}.`}
            </>
          }
          keep="Keep the present one"
          act="Make current"
          busy={verb.isPending}
          onAct={() => verb.mutate({ id: asking.id, act: "make-current" })}
        >
          {verb.error && <p role="alert" className="error">{verb.error.message}</p>}
        </ConfirmDialog>
      )}
    </>
  );
}

type ColumnsInput = Pick<FitRunsProps, "campaign" | "role" | "comparedId"> & { onCancel: (run: FitRunAnswer) => void; onMakeCurrent: (run: FitRunAnswer) => void };

function columnsFor({ campaign: { id: campaignId, timeZone, now }, role, comparedId, onCancel, onMakeCurrent }: ColumnsInput): TableColumn<FitRunAnswer>[] {
  return [
    { id: "run", head: "Run", slot: "a", cell: ({ id, current }) => <>{id}{current && <b>, current</b>}</> },
    { id: "settings", head: "Settings", slot: "c", cell: ({ settings, codeVersion }) => <>{settingsWords(settings)}<span className="line-2">code {codeVersion}</span></> },
    { id: "why", head: "Why", slot: "w", cell: ({ why, by, createdAt }) => <>{why ?? "As measured"}<span className="line-2">{by && `${by}, `}{formatRecent(createdAt, timeZone, now)}</span></> },
    { id: "progress", head: "Fitted", slot: "b", align: "right", cell: (run) => <Progress run={run} /> },
    {
      id: "verbs",
      head: "",
      slot: "d",
      align: "right",
      cell: (run) => (
        <span className="inline-flex flex-wrap justify-end gap-2">
          {run.state === "waiting" && may(role, "fit again") && <Button small onClick={() => onCancel(run)}>Cancel</Button>}
          {run.state === "ready" && !run.current && run.id !== comparedId && <Link className="button small" href={`/campaigns/${campaignCode(campaignId)}/fits?run=${run.id}`} scroll={false}>Compare</Link>}
          {run.state === "ready" && !run.current && may(role, "fit again") && <Button small onClick={() => onMakeCurrent(run)}>Make current</Button>}
        </span>
      ),
    },
  ];
}

function Progress({ run: { state, done, total } }: { run: FitRunAnswer }) {
  if (state === "ready") return <>{formatCount(done)}</>;
  if (state === "cancelled") return <>given up at {formatCount(done)} of {formatCount(total)}</>;
  const share = total > 0 ? done / total : 0;
  return (
    <>
      <span role="progressbar" aria-label="Fitted" aria-valuemin={0} aria-valuemax={total} aria-valuenow={done}>{formatCount(done)} of {formatCount(total)}</span>
      <span className="filling-line mt-1 block" style={{ "--share": share } as React.CSSProperties} aria-hidden="true"><i /></span>
    </>
  );
}

export const settingsWords = ({ offsetSlope, readout }: FitRunAnswer["settings"]): string => `${offsetSlope ? "offset with slope" : "level offset"}${readout ? `, ${readout} readout` : ""}`;
