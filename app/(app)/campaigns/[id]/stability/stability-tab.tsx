"use client";

import { keepPreviousData, useQueries, useQuery } from "@tanstack/react-query";
import { DeviationChart } from "@/components/charts/deviation-chart";
import { Head, Section } from "@/components/ui/page";
import { Empty, Loading, Problem } from "@/components/ui/states";
import { stabilityWords } from "@/lib/analysis/stability-words";
import { campaignOptions, stabilityOptions } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import { capitalised, listOf } from "@/lib/format";
import { curvesOf, STATISTICS, toDeviationPoint } from "../stability-curves";
import type { AnalysisProps } from "./analysis-screen";
import { selectionOf } from "./analysis-view";
import { CompensationChoice, DeadTimeChoice, FitRunChoice, FlagChoice, MediaChoice, QuantityChoice, SetPointChoice, shownMedia, StatisticChoice, TypedChoices } from "./choices";
import { Folded } from "./folded";
import { NoiseTable } from "./noise-table";
import { StabilityNumbers } from "./stability-numbers";
import { WhatWasUsed } from "./what-was-used";

/** Stability of f0 or Q: one large plot, the noise under it, the same in numbers, and what was used. */
export function StabilityTab({ campaign, view, set }: AnalysisProps) {
  const media = shownMedia({ campaign, view });
  const setPointC = view.setPointC ?? (campaign.setPointsC.length > 1 ? campaign.setPointsC[0] : undefined);
  const { quantity, statistic, taus, confidence, normalise, compensate, leaveOut, deadTime, points, beside } = view;
  const asked = { quantity, statistic, taus, confidence, normalise, compensate: compensate === "none" ? undefined : compensate, leaveOut, deadTime: deadTime === "stated" ? undefined : deadTime };
  const of = (campaignId: string, ask: Record<string, string | number | undefined>, part: "within" | "phases") => ({
    ...stabilityOptions(campaignId, { ...asked, ...ask, view: part }),
    enabled: points === "both" || points === part,
    placeholderData: keepPreviousData,
  });
  const own = selectionOf(view, setPointC);
  const within = useQueries({ queries: media.map(({ medium }) => of(campaign.id, { ...own, medium }, "within")) });
  const across = useQueries({ queries: media.map(({ medium }) => of(campaign.id, { ...own, medium }, "phases")) });
  const other = useQuery({ ...campaignOptions(beside?.campaignId ?? campaign.id), enabled: beside !== undefined });
  const besideAsk = { medium: beside?.medium, setPointC: other.data && other.data.setPointsC.length > 1 ? (view.setPointC ?? other.data.setPointsC[0]) : undefined };
  const besideReady = beside !== undefined && other.data !== undefined;
  const besideWithin = useQuery({ ...of(beside?.campaignId ?? campaign.id, besideAsk, "within"), enabled: besideReady && points !== "phases" });
  const besideAcross = useQuery({ ...of(beside?.campaignId ?? campaign.id, besideAsk, "phases"), enabled: besideReady && points !== "within" });

  const inside = points === "phases" ? [] : within;
  const between = points === "within" ? [] : across;
  const wanted = [...inside, ...between, ...(beside ? [other, ...(points === "phases" ? [] : [besideWithin]), ...(points === "within" ? [] : [besideAcross])] : [])];
  const failed = wanted.filter(({ error }) => error);
  const insideData = inside.map(({ data, error }) => (error ? undefined : data));
  const betweenData = between.map(({ data, error }) => (error ? undefined : data));
  const besideLabel = beside && `${campaignCode(beside.campaignId)}, ${beside.medium === "air" ? "air" : (other.data?.media.find(({ medium }) => medium === beside.medium)?.name ?? beside.medium)}`;
  const besideCurve = beside && besideLabel ? [{ id: "beside", label: besideLabel, pen: "third" as const, within: (besideWithin.data?.points ?? []).map(toDeviationPoint), across: (besideAcross.data?.points ?? []).map(toDeviationPoint) }] : [];
  const curves = [...curvesOf(media, insideData, betweenData), ...besideCurve.filter((curve) => curve.within.length + curve.across.length > 0)];
  const inHz = normalise === "absolute" && quantity === "f0";
  const said = statistic === "tdev" ? undefined : media.flatMap(({ medium, name }, i) => stabilityWords({ name: medium === "air" ? "air" : name, within: insideData[i]?.points ?? [], across: betweenData[i]?.points ?? [], unit: inHz ? "Hz" : "" }) ?? [])[0];
  const { label, quantity: axis } = STATISTICS[statistic];
  const shownAxis = inHz ? { ...axis, sub: statistic === "tdev" ? axis.sub : undefined, unit: statistic === "tdev" ? "Hz\u00a0s" : "Hz" } : axis;
  const code = campaignCode(campaign.id);
  const band = `${Math.round(Number(confidence) * 100)} %`;
  const named = media.map(({ medium, name }, i) => ({ id: medium, name: medium === "air" ? "Air" : name, within: insideData[i], across: betweenData[i] }));
  const all = beside && besideLabel ? [...named, { id: "beside", name: besideLabel, within: besideWithin.data, across: besideAcross.data }] : named;
  return (
    <>
      <Section
        head="Choose"
        controls={
          <Folded sentence={`${quantity === "f0" ? "f₀" : "Q"}${normalise === "absolute" ? "" : ", fractional"}, in ${listOf(media.map(({ medium, name }) => (medium === "air" ? "air" : name)))}, ${label}${compensate === "temperature" ? ", compensated for temperature" : ""}`}>
            <QuantityChoice view={view} set={set} absolute />
            <MediaChoice campaign={campaign} view={view} set={set} />
            <SetPointChoice campaign={campaign} view={view} set={set} chosen={setPointC} />
            <TypedChoices view={view} set={set} beside />
            <StatisticChoice campaign={campaign} view={view} set={set} />
            <CompensationChoice view={view} set={set} />
            <FitRunChoice campaign={campaign} view={view} set={set} />
          </Folded>
        }
      >
        <div aria-busy={wanted.some(({ isFetching }) => isFetching)}>
          {said && <p className="say mb-4">{said}</p>}
          {failed.length > 0 && <Problem error={failed[0].error} onRetry={() => void Promise.all(failed.map((one) => one.refetch()))} />}
          {curves.length > 0 ? (
            <DeviationChart
              label={`${capitalised(label)} of ${quantity === "f0" ? "f0" : "Q"}, ${code}`}
              file={`${code}-${statistic}-${quantity}`}
              curves={curves}
              quantity={shownAxis}
              band={band}
              sentence={`${band} bands by chi-squared with the noise of each averaging time; dotted: slopes of the noise types. Within phases no term reaches across a hole.`}
            />
          ) : wanted.some(({ isPending, fetchStatus }) => isPending && fetchStatus !== "idle") ? (
            <Loading label="the stability" height={430} />
          ) : (
            failed.length === 0 && <Empty>A phase needs at least three repeats before its stability can be told.</Empty>
          )}
          {curves.length > 0 && (
            <div className="mt-7">
              <Head remark="an asterisk: fewer than 30 averages, noise from the last stretch that had them, or assumed">Numbers</Head>
              <StabilityNumbers curves={curves} band={band} file={`${code}-${statistic}-${quantity}-numbers`} quantity={shownAxis} />
            </div>
          )}
        </div>
      </Section>
      {curves.length > 0 && (
        <>
          <Section head="Noise" note="Parts of the overlapping Allan variance, fitted together, none below nothing, with standard uncertainties.">
            <NoiseTable curves={all} unit={inHz ? "Hz" : ""} />
          </Section>
          <Section
            head="What was used"
            note="Press a flag to leave its repeats out or let them in, and see the difference. A person’s exclusions and discarded repeats stay out."
            controls={
              <Folded sentence={leaveOut === undefined ? "The usual flags leave out" : leaveOut === "none" ? "No flag leaves out" : `Left out: ${leaveOut.replaceAll(",", ", ")}`}>
                <FlagChoice campaign={campaign} view={view} set={set} />
                <DeadTimeChoice campaign={campaign} view={view} set={set} />
              </Folded>
            }
          >
            <WhatWasUsed curves={all} />
          </Section>
        </>
      )}
    </>
  );
}
