"use client";

import { useWidth } from "@/components/charts/use-width";
import { NowFlag } from "@/components/strip/strip-ruler";
import { MINUS } from "@/lib/format";

const NARROWEST_PX = 34;

/** Days before and after the present, for rigs whose clocks are apart: each row has its own date. */
export function DaysFromNow({ back, ahead }: { back: number; ahead: number }) {
  const [ref, width] = useWidth();
  const perDay = width / (back + ahead);
  const every = perDay >= NARROWEST_PX ? 1 : perDay * 2 >= NARROWEST_PX ? 2 : 4;
  const days = Array.from({ length: back + ahead - 1 }, (_, i) => i + 1 - back).filter((day) => day !== 0 && day % every === 0 && Math.abs(day) * perDay > 40);
  const nowX = back * perDay;
  return (
    <div ref={ref} className="strip h-6">
      {width > 0 && (
        <svg width={width} height={24} role="img" aria-label="Days before and after the present">
          {days.map((day) => <text key={day} x={(day + back) * perDay} y={17} textAnchor="middle">{day < 0 ? `${MINUS}${-day} d` : `+${day} d`}</text>)}
          <NowFlag x={nowX} y={3} text="now" />
        </svg>
      )}
    </div>
  );
}
