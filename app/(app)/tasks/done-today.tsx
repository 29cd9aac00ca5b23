"use client";

import { useQuery } from "@tanstack/react-query";
import { formatTime, startOfLocalDay } from "@/lib/format-time";
import { answeredTasksOptions } from "@/lib/tasks/client";

export function DoneToday({ zone, now }: { zone: string; now: string }) {
  const { data } = useQuery(answeredTasksOptions());
  const midnight = startOfLocalDay(now, zone);
  const today = data?.items.filter(({ answeredAt }) => answeredAt && Date.parse(answeredAt) >= midnight) ?? [];
  if (today.length === 0) return null;
  return (
    <section className="done-today" aria-labelledby="done-today">
      <h2 id="done-today">Done today</h2>
      <ul>
        {today.map(({ id, answeredAt, instruction, answer, answeredBy, note, rig }) => (
          <li key={id}>
            <span className="num">{answeredAt && formatTime(answeredAt, zone)}</span>
            <span>
              {answer === "cannot" && "Cannot: "}{instruction.split(/(?<=\.)\s/, 1)[0].replace(/\.$/, "")}, {rig}
              <em>by {answeredBy ?? "somebody"}{note && `: ${note}`}</em>
            </span>
          </li>
        ))}
      </ul>
    </section>
  );
}
