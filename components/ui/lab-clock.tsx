"use client";

import { useEffect, useState } from "react";
import { formatTime } from "@/lib/format-time";

/** Lab time, going on from the time the server gave: the clock of this computer is not trusted. */
export function LabClock({ now, zone }: { now: string; zone: string }) {
  const [time, setTime] = useState(now);

  useEffect(() => {
    const ahead = new Date(now).getTime() - Date.now();
    const tick = () => setTime(new Date(Date.now() + ahead).toISOString());
    tick();
    const timer = setInterval(tick, 5000);
    return () => clearInterval(timer);
  }, [now]);

  return (
    <span className="clock" title={zone}>
      Lab time <b>{formatTime(time, zone)}</b>
    </span>
  );
}
