"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { usePathname, useSearchParams } from "next/navigation";
import { useMemo } from "react";
import { PageTitle, Section } from "@/components/ui/page";
import { StateMark } from "@/components/ui/state-mark";
import { Empty, Loading, Problem } from "@/components/ui/states";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { campaignOptions } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount } from "@/lib/format";
import { useFollow } from "../use-follow";
import { useView } from "../use-view";
import { AirTab } from "./air-tab";
import { readAnalysisView, TABS, type AnalysisView, type Tab } from "./analysis-view";
import { DriftTab } from "./drift-tab";
import { StabilityTab } from "./stability-tab";
import { TemperatureTab } from "./temperature-tab";

/** What every part of the analysis is given: the campaign, the view in the address, and a way to change it. */
export type AnalysisProps = { campaign: CampaignAnswer; view: AnalysisView; set: (changes: Record<string, string | null>) => void };

const WORDS: Record<Tab, string> = { stability: "Stability", drift: "Drift and steps", temperature: "Temperature", air: "Air reference return" };

/** A campaign's analysis: what is shown is in the address, so a link shows a colleague the same. */
export function AnalysisScreen({ campaignId }: { campaignId: string }) {
  const { data: campaign, error, refetch } = useQuery(campaignOptions(campaignId));
  useFollow(campaign);
  const { set } = useView();
  const search = useSearchParams();
  const path = usePathname();
  const view = useMemo(() => readAnalysisView(Object.fromEntries(search)), [search]);
  if (!campaign) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the campaign" height={320} />}</Section>;

  const code = campaignCode(campaignId);
  const tabAddress = (tab: Tab) => {
    const next = new URLSearchParams(search);
    if (tab === "stability") next.delete("tab");
    else next.set("tab", tab);
    return next.size > 0 ? `${path}?${next}` : path;
  };
  const given = { campaign, view, set };
  return (
    <>
      <PageTitle
        margin={<><StateMark state={campaign.word} /><div>As of repeat {formatCount(campaign.progress.repeats)}{view.fitRunId && `, fit run ${view.fitRunId}`}</div></>}
        crumbs={[{ label: "Campaigns", href: "/campaigns" }, { label: code, href: `/campaigns/${code}` }]}
        tabs={
          <nav className="tabs" aria-label="Analysis">
            {TABS.map((tab) => <Link key={tab} href={tabAddress(tab)} aria-current={view.tab === tab ? "page" : undefined} scroll={false}>{WORDS[tab]}</Link>)}
            <Link href={`/campaigns/${code}/fits`}>Fits</Link>
          </nav>
        }
      >
        {campaign.name}, analysis
      </PageTitle>
      {campaign.media.length === 0 ? (
        <Section><Empty>Nothing has been measured yet.</Empty></Section>
      ) : view.tab === "stability" ? (
        <StabilityTab {...given} />
      ) : view.tab === "drift" ? (
        <DriftTab {...given} />
      ) : view.tab === "temperature" ? (
        <TemperatureTab {...given} />
      ) : (
        <AirTab {...given} />
      )}
    </>
  );
}
