import { formatNumber, formatUncertain } from "@/lib/format";
import { formatDayTime } from "@/lib/format-time";
import { placeInWords, traceAt, type StripPlace } from "./strip-cursor";
import type { StripInput } from "./strip-input";

type StripReadingProps = { input: StripInput; place: StripPlace | undefined; zone: string; unit: string };

/** What the cursor stands on, in a line under the strip and not in a box over it. */
export function StripReading({ input, place, zone, unit }: StripReadingProps) {
  const segment = place && input.segments[place.index];
  const point = place && traceAt(input, place);
  return (
    <div className="plot-reading">
      <span className="num whitespace-normal" aria-live="polite">
        {place && segment && (
          <>
            <b>{formatDayTime(place.at, zone, input.now ?? input.from)}</b>&ensp;{placeInWords(input.segments, place)}
            {(point ?? segment.mean) && ":"}
            {point && <>&ensp;<span className="value num">{point.u ? formatUncertain(point.value, point.u, { signed: true }) : formatNumber(point.value, { decimals: 1, signed: true })} {unit}</span></>}
            {segment.mean && <>&ensp;<span className="value num">mean {segment.mean}</span></>}
          </>
        )}
      </span>
      <span className="keys">Arrow keys step by phase, Shift by repeat</span>
    </div>
  );
}
