"use client";

import { useQuery } from "@tanstack/react-query";
import { Section } from "@/components/ui/page";
import { Loading, Problem } from "@/components/ui/states";
import { airReturnOptions } from "@/lib/campaigns/client";
import { BackToAir } from "../back-to-air";
import { airWords, coolingWords, growthWords } from "./air-words";
import type { AnalysisProps } from "./analysis-screen";
import { selectionOf } from "./analysis-view";
import { FitRunChoice, SetPointChoice, TypedChoices } from "./choices";

/** The air reference after cleaning: the verdict as a sentence, what it rests on, cooling after drying, and every reference. */
export function AirTab(props: AnalysisProps) {
  const { campaign, view, set } = props;
  const setPointC = view.setPointC ?? (campaign.setPointsC.length > 1 ? campaign.setPointsC[0] : undefined);
  const { data, error, refetch, isFetching } = useQuery(airReturnOptions(campaign.id, selectionOf(view, setPointC)));
  return (
    <>
      <Section
        head="Choose"
        note="Every decision is at 99 %. What contradicts itself or cannot be told stays undecided."
        controls={<><SetPointChoice {...props} chosen={setPointC} /><TypedChoices view={view} set={set} /><FitRunChoice {...props} /></>}
      >
        <div aria-busy={isFetching}>
          {error && <Problem error={error} onRetry={() => void refetch()} />}
          {data ? (
            <>
              <p className="say mb-3">{airWords(data)}</p>
              <p className="max-w-[60em]">{growthWords(data)}</p>
            </>
          ) : (
            !error && <Loading label="the air references" height={160} />
          )}
        </div>
      </Section>
      {data && (
        <Section head="Cooling after drying" note="The exponential return within the air references, told from drift and noise.">
          <p className="max-w-[60em]">{coolingWords(data.cooling)}</p>
        </Section>
      )}
      <Section head="Air references" note="How far each came back: its phase value against the baseline, and its course within the phase.">
        <BackToAir campaign={campaign} />
      </Section>
    </>
  );
}
