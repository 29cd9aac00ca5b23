import { Vitals } from "@/components/ui/page";
import { formatCount, formatVolume } from "@/lib/format";
import { formatDay, formatDurationInWords, formatPlusMinus } from "@/lib/format-time";
import type { CheckAnswer, Choices } from "@/lib/campaigns/draft-schema";

type ForecastProps = { checked: CheckAnswer | undefined; busy: boolean; rig: Choices["rigs"][number] | undefined; now: string; notBefore: string };

/** The estimate as a sentence, and what it needs of steps, liquid, waste and people. */
export function Forecast({ checked, busy, rig, now, notBefore }: ForecastProps) {
  if (!checked || !rig) return <p className="estimate text-ink2">Choose a protocol, a sensor and a rig, and give every slot a port and a lot.</p>;
  const { seconds, lowS, highS, steps, repeats, wasteMl, people } = checked.estimate;
  const litres = checked.slots.reduce((sum, { neededMl }) => sum + neededMl, 0);
  return (
    <div aria-busy={busy} aria-live="polite">
      <p className="estimate">
        {formatDurationInWords(seconds)} on {rig.name}, give or take {formatPlusMinus((highS - lowS) / 2).replace(/^±\s*/, "")}. {beginning(rig, notBefore, now, seconds)}
      </p>
      <Vitals
        items={[
          { label: "Steps and repeats", value: formatCount(steps), note: `steps, ${formatCount(repeats)} repeats` },
          { label: "Liquid", value: formatVolume(litres), note: `for ${checked.slots.length} slots` },
          { label: "Waste", value: formatVolume(wasteMl), note: rig.wasteCapacityMl === null ? "container not measured" : `the container holds ${formatVolume(rig.wasteCapacityMl)}` },
          { label: "A person is asked", value: formatCount(people), note: "times by the protocol" },
        ]}
      />
    </div>
  );
}

function beginning({ ahead, timeZone }: Choices["rigs"][number], notBefore: string, now: string, seconds: number): string {
  if (notBefore) return "It begins at the time chosen, if the rig is free then.";
  if (ahead > 0) return ahead === 1 ? "One campaign is before it." : `${ahead} campaigns are before it.`;
  return `The rig is free: it would end about ${formatDay(new Date(Date.parse(now) + seconds * 1000), timeZone, now)}.`;
}
