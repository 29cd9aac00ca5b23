"use client";

import { useQuery } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import { Button } from "@/components/ui/button";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Head } from "@/components/ui/page";
import { F0, Q } from "@/components/ui/quantity";
import { Empty, Loading, Problem } from "@/components/ui/states";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { comparisonOptions } from "@/lib/fit-runs/client";
import type { Comparison as ComparisonAnswer, FitRunAnswer } from "@/lib/fit-runs/schema";
import { formatCount, formatNumber, formatUncertain, NO_VALUE } from "@/lib/format";
import { settingsWords } from "./fit-runs";

type ComparisonProps = { campaign: CampaignAnswer; run: FitRunAnswer; against: FitRunAnswer };
type Phase = ComparisonAnswer["phases"][number];
type Change = ComparisonAnswer["changes"][number];
type Value = Phase["ours"]["f0"];

const FIRST = 20;

/** Two runs beside each other: totals by medium first, then phase by phase. */
export function Comparison({ campaign, run, against }: ComparisonProps) {
  const { data, error, refetch } = useQuery(comparisonOptions(run.id, against.id));
  const [all, setAll] = useState(false);
  const nameOf = useMemo(() => new Map(campaign.media.map(({ medium, name }) => [medium, medium === "air" ? "Air" : name])), [campaign.media]);
  const changes = useMemo(() => changeColumns(nameOf), [nameOf]);
  const columns = useMemo(() => phaseColumns(nameOf, run.id, against.id), [nameOf, run.id, against.id]);
  if (!data) return error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the comparison" height={200} />;
  if (data.phases.length === 0) return <Empty>The two runs have no phase in common yet.</Empty>;
  const shown = all ? data.phases : data.phases.slice(0, FIRST);
  return (
    <div>
      <Head remark={`run ${run.id}: ${settingsWords(run.settings)}; run ${against.id}: ${settingsWords(against.settings)}`}>Run {run.id} less run {against.id}</Head>
      <DataTable label="Changes by medium" columns={changes} rows={data.changes} rowKey={({ medium }) => medium} empty={<Empty>No phase has a value in both runs.</Empty>} />
      <div className="mt-5">
        <Head>By phase</Head>
        <DataTable label="Phase values of both runs" columns={columns} rows={shown} rowKey={({ phaseId }) => phaseId} />
        {!all && data.phases.length > FIRST && <div className="table-foot"><Button small onClick={() => setAll(true)}>All {formatCount(data.phases.length)} phases</Button></div>}
      </div>
    </div>
  );
}

const signed = (value: number, digits = 3) => formatNumber(Number(value.toPrecision(digits)), { signed: true });
const sd = (value: number | null) => (value === null ? NO_VALUE : formatNumber(Number(value.toPrecision(2))));

const changeColumns = (nameOf: ReadonlyMap<string, string>): TableColumn<Change>[] => [
  { id: "medium", head: "Medium", slot: "a", cell: ({ medium }) => nameOf.get(medium) ?? medium },
  { id: "n", head: "Phases", slot: "c", align: "right", cell: ({ n }) => formatCount(n) },
  { id: "f0", head: <><F0 /> on average / ppm</>, slot: "b", align: "right", cell: ({ f0Ppm }) => signed(f0Ppm) },
  { id: "f0sd", head: "scatter / ppm", slot: "x", align: "right", cell: ({ f0PpmSd }) => sd(f0PpmSd) },
  { id: "q", head: <><Q /> on average / %</>, slot: "d", align: "right", cell: ({ qPercent }) => signed(qPercent) },
  { id: "qsd", head: "scatter / %", slot: "x", align: "right", cell: ({ qPercentSd }) => sd(qPercentSd) },
];

const valueText = ({ mean, u }: Value, decimals: number) => (mean === null ? NO_VALUE : formatUncertain(mean, u, { decimals }));

function difference(ours: Value, theirs: Value, scale: (value: number, of: number) => number): string {
  return ours.mean === null || theirs.mean === null ? NO_VALUE : signed(scale(ours.mean, theirs.mean));
}

const phaseColumns = (nameOf: ReadonlyMap<string, string>, run: string, against: string): TableColumn<Phase>[] => [
  { id: "cycle", head: "Cycle", slot: "c", align: "right", cell: ({ cycle }) => formatCount(cycle) },
  { id: "medium", head: "Medium", slot: "a", cell: ({ medium }) => nameOf.get(medium) ?? medium },
  { id: "ours", head: <><F0 /> / Hz, run {run}</>, slot: "x", align: "right", cell: ({ ours }) => valueText(ours.f0, 4) },
  { id: "theirs", head: <>run {against}</>, slot: "x", align: "right", cell: ({ theirs }) => valueText(theirs.f0, 4) },
  { id: "ppm", head: "less / ppm", slot: "b", align: "right", cell: ({ ours, theirs }) => difference(ours.f0, theirs.f0, (a, b) => (a / b - 1) * 1e6) },
  { id: "ourQ", head: <><Q />, run {run}</>, slot: "x", align: "right", cell: ({ ours }) => valueText(ours.q, 1) },
  { id: "theirQ", head: <>run {against}</>, slot: "x", align: "right", cell: ({ theirs }) => valueText(theirs.q, 1) },
  { id: "percent", head: "less / %", slot: "d", align: "right", cell: ({ ours, theirs }) => difference(ours.q, theirs.q, (a, b) => (a / b - 1) * 100) },
  { id: "used", head: "Used", slot: "x", align: "right", cell: ({ ours, theirs }) => (ours.nUsed === theirs.nUsed ? formatCount(ours.nUsed) : `${formatCount(ours.nUsed)}, ${formatCount(theirs.nUsed)}`) },
];
