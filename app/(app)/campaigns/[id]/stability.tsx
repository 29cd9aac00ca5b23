"use client";

import { useQueries } from "@tanstack/react-query";
import Link from "next/link";
import { useMemo } from "react";
import { DeviationChart } from "@/components/charts/deviation-chart";
import { ChoiceWord } from "@/components/ui/choice-sentence";
import { Head } from "@/components/ui/page";
import { Symbol } from "@/components/ui/quantity";
import { Empty, Loading, Problem } from "@/components/ui/states";
import { stabilityWords } from "@/lib/analysis/stability-words";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { address, stabilityOptions } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import { curvesOf, STATISTICS } from "./stability-curves";
import { setPointOf, type Statistic, type View } from "./view";

type StabilityProps = { campaign: CampaignAnswer; view: View; set: (changes: Record<string, string | null>) => void };

const MOST_MEDIA = 4;
const POINTS = [
  { value: "both", label: "within phases and from phase to phase" },
  { value: "within", label: "within phases" },
  { value: "phases", label: "from phase to phase" },
];

/** Stability of f0 or Q: inside phases as lines, from phase to phase as hollow points, and what it means for the next protocol. */
export function Stability({ campaign, view, set }: StabilityProps) {
  const { quantity, statistic, points, medium } = view;
  const media = useMemo(() => shownMedia(campaign.media, medium), [campaign.media, medium]);
  const ask = { quantity, statistic, setPointC: setPointOf(view, campaign.setPointsC) };
  const optionsFor = (view: "within" | "phases") => ({ queries: media.map((one) => ({ ...stabilityOptions(campaign.id, { ...ask, medium: one.medium, view }), enabled: points === "both" || points === view })) });
  const within = useQueries(optionsFor("within"));
  const across = useQueries(optionsFor("phases"));

  const wanted = [...(points === "phases" ? [] : within), ...(points === "within" ? [] : across)];
  const failed = wanted.find(({ error }) => error);
  const curves = curvesOf(media, points === "phases" ? [] : within.map(({ data }) => data), points === "within" ? [] : across.map(({ data }) => data));
  const here = media.findIndex((one) => one.medium === medium);
  const words = here < 0 ? undefined : stabilityWords({ name: medium === "air" ? "air" : (media[here]?.name ?? medium), within: within[here]?.data?.points ?? [], across: across[here]?.data?.points ?? [] });
  const { label, quantity: axis } = STATISTICS[statistic];

  return (
    <div aria-busy={wanted.some(({ isFetching }) => isFetching)}>
      <Head>
        <span>
          <ChoiceWord label="Statistic" value={statistic} options={Object.entries(STATISTICS).map(([value, one]) => ({ value, label: capital(one.label) }))} onChoose={(value) => set({ statistic: value === "oadev" ? null : (value as Statistic) })} /> of{" "}
          <ChoiceWord label="Quantity" value={quantity} options={[{ value: "f0", label: "f₀" }, { value: "q", label: "Q" }]} onChoose={(value) => set({ quantity: value === "f0" ? null : value })} />
        </span>
      </Head>
      <p className="small mb-2 text-ink2">
        <ChoiceWord label="Points" value={points} options={POINTS} onChoose={(value) => set({ points: value === "both" ? null : value })} />, 68 % band.{" "}
        <Link href={address(`/campaigns/${campaignCode(campaign.id)}/stability`, { quantity: quantity === "q" ? "q" : undefined, statistic: statistic === "oadev" ? undefined : statistic, setPointC: view.setPointC })}>Analysis</Link>
      </p>
      {failed && <Problem error={failed.error} onRetry={() => void Promise.all(wanted.filter(({ error }) => error).map((one) => one.refetch()))} />}
      {curves.length > 0 ? (
        <DeviationChart label={`${capital(label)} of ${quantity === "f0" ? "f0" : "Q"}, ${campaignCode(campaign.id)}`} file={`${campaignCode(campaign.id)}-${statistic}-${quantity}`} curves={curves} quantity={axis} sentence={words} height={400} small />
      ) : wanted.some(({ isPending }) => isPending) && !failed ? (
        <Loading label="the stability" height={400} />
      ) : (
        !failed && <Empty>A phase needs at least three repeats before its <Symbol name="σ" sub="y" /> can be drawn.</Empty>
      )}
    </div>
  );
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);

/** The chosen medium first among at most four, then air, then the others in their order. */
function shownMedia(media: CampaignAnswer["media"], chosen: string): CampaignAnswer["media"] {
  const rank = (medium: string) => (medium === chosen ? 0 : medium === "air" ? 1 : 2);
  const kept = [...media].sort((a, b) => rank(a.medium) - rank(b.medium)).slice(0, MOST_MEDIA);
  return media.filter((one) => kept.includes(one));
}
