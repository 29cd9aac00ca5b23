"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { usePathname, useSearchParams } from "next/navigation";
import { PageTitle, Section } from "@/components/ui/page";
import { StateMark } from "@/components/ui/state-mark";
import { Empty, Loading, Problem } from "@/components/ui/states";
import { campaignOptions } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import { fitRunsOptions } from "@/lib/fit-runs/client";
import { may, type Role } from "@/lib/permissions";
import { Comparison } from "./comparison";
import { FitAgain } from "./fit-again";
import { FitRuns } from "./fit-runs";

/** The fits of a campaign: every run kept, made beside each other, one of them current. The compared run is in the address. */
export function FitsScreen({ campaignId, role }: { campaignId: string; role: Role }) {
  const { data: campaign } = useQuery(campaignOptions(campaignId));
  const { data, error, refetch } = useQuery(fitRunsOptions(campaignId));
  const path = usePathname();
  const search = useSearchParams();
  if (!campaign || !data) return <Section>{error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the fit runs" height={240} />}</Section>;

  const code = campaignCode(campaignId);
  const current = data.items.find((run) => run.current);
  const ready = data.items.filter(({ state }) => state === "ready");
  const asked = ready.find(({ id }) => id === search.get("run"));
  const compared = asked ?? ready.find((run) => !run.current);
  const against = ready.find(({ id }) => id === search.get("with")) ?? current;
  const given = { campaign, runs: data.items, role };
  return (
    <>
      <PageTitle
        margin={<StateMark state={campaign.word} />}
        crumbs={[{ label: "Campaigns", href: "/campaigns" }, { label: code, href: `/campaigns/${code}` }]}
        tabs={
          <nav className="tabs" aria-label="Analysis">
            <Link href={`/campaigns/${code}/stability`}>Stability</Link>
            <Link href={`/campaigns/${code}/stability?tab=drift`}>Drift and steps</Link>
            <Link href={`/campaigns/${code}/stability?tab=temperature`}>Temperature</Link>
            <Link href={`/campaigns/${code}/stability?tab=air`}>Air reference return</Link>
            <Link href={path} aria-current="page">Fits</Link>
          </nav>
        }
      >
        {campaign.name}, fits
      </PageTitle>
      <Section head="Fit runs" note="Every run is kept. Pages, limits and exports use the current one; decisions of the past keep the run they were made with.">
        {error && <Problem error={error} onRetry={() => void refetch()} />}
        {data.items.length > 0 ? <FitRuns {...given} comparedId={compared?.id} /> : <Empty>Nothing has been fitted yet.</Empty>}
      </Section>
      {compared && against && compared.id !== against.id && (
        <Section head="Side by side" note="Phase values of both runs, and by medium how they differ. Alarms that only the other run finds are added when it is made current, marked as found on refit.">
          <Comparison campaign={campaign} run={compared} against={against} />
        </Section>
      )}
      {may(role, "fit again") && data.items.length > 0 && (
        <Section head="Fit again" note="All sweeps are fitted again beside what there is; nothing changes until somebody makes the new run current.">
          <FitAgain {...given} />
        </Section>
      )}
    </>
  );
}
