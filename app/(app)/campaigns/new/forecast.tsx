import { StripRuler } from "@/components/strip/strip-ruler";
import { Vitals } from "@/components/ui/page";
import { Loading } from "@/components/ui/states";
import type { CheckAnswer, Choices } from "@/lib/campaigns/draft-schema";
import { formatCount, formatVolume } from "@/lib/format";
import { formatDayTime, formatDurationInWords, formatPlusMinus } from "@/lib/format-time";
import { RigLane } from "../../rigs/rig-lane";

type ForecastProps = { checked: CheckAnswer | undefined; /** Everything that it hangs on is chosen. */ complete: boolean; busy: boolean; rig: Choices["rigs"][number] | undefined };

/** The estimate as a sentence, the rig's next weeks with this campaign in them, and what it needs of steps, liquid, waste and people. */
export function Forecast({ checked, complete, busy, rig }: ForecastProps) {
  if (!checked && complete && busy) return <Loading label="the forecast" height={170} />;
  if (!checked || !rig) return <p className="estimate text-ink2">{complete ? "The forecast comes once what stands against it is put right." : "Choose a protocol, a sensor and a rig, and give every slot a port and a lot."}</p>;
  const { estimate, forecast, slots } = checked;
  const { seconds, lowS, highS, steps, repeats, wasteMl } = estimate;
  const litres = slots.reduce((sum, { neededMl }) => sum + neededMl, 0);
  return (
    <div aria-busy={busy}>
      <p className="estimate" aria-live="polite">
        {formatDurationInWords(seconds)} on {rig.name}{forecast ? whenOf(forecast, rig.timeZone) : `, give or take ${halfRange(lowS, highS)}.`}
      </p>
      {forecast && <Weeks forecast={forecast} />}
      <Vitals
        items={[
          { label: "Steps and repeats", value: formatCount(steps), note: `steps, ${formatCount(repeats)} repeats` },
          { label: "Liquid", value: formatVolume(litres), note: `for ${slots.length} ${slots.length === 1 ? "slot" : "slots"}` },
          { label: "Waste", value: formatVolume(wasteMl), note: rig.wasteCapacityMl === null ? "container not measured" : `the container holds ${formatVolume(rig.wasteCapacityMl)}` },
          { label: "A person is needed", ...peopleOf(checked, rig.timeZone) },
        ]}
      />
    </div>
  );
}

type InLine = NonNullable<CheckAnswer["forecast"]>;

function Weeks({ forecast: { lane, people } }: { forecast: InLine }) {
  return (
    <div className="mt-3">
      <StripRuler from={lane.from} to={lane.to} now={lane.now} zone={lane.timeZone} />
      <div className="border-y border-rule"><RigLane lane={lane} rings={people} /></div>
    </div>
  );
}

function whenOf({ from, end, lane: { now } }: InLine, zone: string): string {
  const time = (at: string) => formatDayTime(at, zone, now);
  const range = end.range ? `, give or take ${halfRange(Date.parse(end.range.earliest) / 1000, Date.parse(end.range.latest) / 1000)}` : ", if what is held there goes on now";
  return `, from ${time(from)} to ${time(end.at)}${range}.`;
}

const halfRange = (low: number, high: number) => formatPlusMinus((high - low) / 2).replace(/^±\s*/, "");

function peopleOf({ estimate, forecast }: CheckAnswer, zone: string) {
  const times = Math.max(forecast?.people.length ?? 0, estimate.people);
  if (times === 0) return { value: "not at all" };
  const first = forecast?.people[0];
  return { value: `${formatCount(times)} ${times === 1 ? "time" : "times"}`, note: first && forecast ? `first ${formatDayTime(first.at, zone, forecast.lane.now)}, ${first.label}` : "by the protocol" };
}
