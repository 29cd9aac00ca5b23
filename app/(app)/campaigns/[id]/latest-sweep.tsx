"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { SweepChart } from "@/components/charts/sweep-chart";
import { Head } from "@/components/ui/page";
import { WordTag } from "@/components/ui/tag";
import { Empty, Loading, Problem } from "@/components/ui/states";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { sweepOptions } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount, formatUncertain } from "@/lib/format";
import { formatRecent } from "@/lib/format-time";
import { ProblemError } from "@/lib/http/fetch-json";

const UNITS = [["V", 1], ["mV", 1e3], ["µV", 1e6]] as const;

/** The newest sweep with its fit and what is left between them. */
export function LatestSweep({ campaign }: { campaign: CampaignAnswer }) {
  const { data: sweep, error, refetch, isFetching } = useQuery({ ...sweepOptions(campaign.id), enabled: campaign.progress.repeats > 0 });
  const none = error instanceof ProblemError && error.status === 404;
  if (campaign.progress.repeats === 0 || none) return <div><Head>Latest sweep</Head><Empty>{none ? "No sweep is kept of these repeats." : "No sweep has come yet."}</Empty></div>;
  if (!sweep) return <div><Head>Latest sweep</Head>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the latest sweep" height={320} />}</div>;

  const { curve, f0Hz, f0StdHz, q, qStd, index, points, takenAt, medium, cycle, flags } = sweep;
  const name = campaign.media.find((one) => one.medium === medium)?.name ?? medium;
  const fitted = curve && curve.fittedV.length > 0;
  const residuals = curve && fitted ? curve.measuredV.map((volts, i) => volts - (curve.fittedV[i] ?? NaN)) : undefined;
  const [unit, scale] = unitFor(residuals ?? []);
  return (
    <div aria-busy={isFetching}>
      <Head remark={`${formatRecent(takenAt, campaign.timeZone, campaign.now)}, repeat ${formatCount(index + 1)}, ${formatCount(points)} points`}><Link href={`/campaigns/${campaignCode(campaign.id)}/readings/${sweep.sequence}/${index}`}>Latest sweep</Link></Head>
      {error && <Problem error={error} onRetry={() => void refetch()} />}
      {curve ? (
        <SweepChart
          label={`Latest sweep of ${campaignCode(campaign.id)}, ${name}, cycle ${cycle}`}
          file={`${campaignCode(campaign.id)}-sweep-${sweep.sequence}-${index}`}
          frequencyHz={curve.frequencyHz}
          panels={[{ quantity: { words: "amplitude", unit: "V" }, measured: curve.measuredV, ...(fitted && { model: curve.fittedV }), height: 150 }]}
          residuals={residuals && { quantity: { words: "residual", unit }, inPhase: residuals.map((volts) => volts * scale) }}
          f0Hz={f0Hz ?? undefined}
          corner={[
            ...(f0Hz === null ? [] : [{ symbol: "f", sub: "0", text: `${formatUncertain(f0Hz, f0StdHz, { decimals: 4 })} Hz` }]),
            ...(q === null ? [] : [{ symbol: "Q", text: formatUncertain(q, qStd, { decimals: 1 }) }]),
          ]}
        />
      ) : (
        <p>
          Measured on the rig without a sweep: {f0Hz === null ? "not fitted yet" : <>f₀ {formatUncertain(f0Hz, f0StdHz, { decimals: 4 })}&nbsp;Hz{q !== null && <>, Q {formatUncertain(q, qStd, { decimals: 1 })}</>}</>}.
        </p>
      )}
      {flags.length > 0 && <p className="mt-2 flex flex-wrap gap-2" aria-label="Flags">{flags.map((flag) => <WordTag key={flag}>{flag}</WordTag>)}</p>}
    </div>
  );
}

function unitFor(volts: readonly number[]): readonly [string, number] {
  const most = volts.reduce((high, value) => (Number.isFinite(value) ? Math.max(high, Math.abs(value)) : high), 0);
  return UNITS.find(([, scale]) => most * scale >= 1) ?? (most > 0 ? UNITS[2] : UNITS[0]);
}
