"use client";

import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { fromZonedTime } from "date-fns-tz";
import { useState, type FormEvent } from "react";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { Loading, Problem } from "@/components/ui/states";
import { fetchJson } from "@/lib/http/fetch-json";
import { formatDayTime } from "@/lib/format-time";
import { may, type Role } from "@/lib/permissions";
import { blockedTimesOptions } from "@/lib/rigs/client";
import type { RigAnswer } from "@/lib/rigs/schema";
import { created } from "@/lib/schema";

const NOTHING = { from: "", to: "", why: "" };

/** When the rig is kept free, in its own time, and a form to block more. */
export function BlockedTimes({ rig, role }: { rig: RigAnswer; role: Role }) {
  const { data, error, refetch, dataUpdatedAt } = useQuery(blockedTimesOptions(rig.id));
  const now = rig.clock === "simulated" ? (rig.reportedClock ?? undefined) : dataUpdatedAt;
  const queries = useQueryClient();
  const [form, setForm] = useState(NOTHING);
  const mayBlock = may(role, "edit rigs");
  const refresh = () => queries.invalidateQueries({ queryKey: ["rigs", "blocked-times", rig.id] });
  const toInstant = (local: string) => fromZonedTime(local, rig.timeZone).toISOString();
  const block = useMutation({
    mutationFn: () =>
      fetchJson(`/api/rigs/${rig.id}/blocked-times`, { method: "POST", body: { from: toInstant(form.from), to: toInstant(form.to), why: form.why }, answer: created }),
    onSuccess: async () => {
      setForm(NOTHING);
      await refresh();
    },
  });
  const unblock = useMutation({
    mutationFn: (windowId: string) => fetchJson(`/api/blocked-times/${windowId}/withdraw`, { method: "POST", body: {}, answer: created }),
    onSuccess: refresh,
  });
  const complete = form.from !== "" && form.to !== "" && form.why.trim() !== "";
  const submit = (event: FormEvent) => {
    event.preventDefault();
    block.mutate();
  };
  const field = (name: keyof typeof NOTHING) => ({ value: form[name], onChange: (event: { target: { value: string } }) => setForm({ ...form, [name]: event.target.value }) });

  if (!data) return error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the blocked times" />;
  return (
    <>
      {data.items.length === 0 && <p className="text-ink2">No time is blocked.</p>}
      <ul>
        {data.items.map(({ id, from, to, why, createdBy }) => (
          <li key={id} className="flex flex-wrap items-baseline gap-x-4 border-b border-rule py-1.5">
            <span className="num">{formatDayTime(from, rig.timeZone, now)} to {formatDayTime(to, rig.timeZone, now)}</span>
            <span className="text-ink2">{why}, {createdBy}</span>
            {mayBlock && <Button className="ml-auto" small busy={unblock.isPending} onClick={() => unblock.mutate(id)}>Unblock</Button>}
          </li>
        ))}
      </ul>
      {mayBlock && (
        <form className="mt-3 flex flex-wrap items-end gap-3" onSubmit={submit}>
          <TextField type="datetime-local" label="From" hint="In the rig’s time" {...field("from")} />
          <TextField type="datetime-local" label="To" hint="In the rig’s time" {...field("to")} />
          <TextField className="min-w-[14em] flex-1" label="Why" {...field("why")} />
          <Button type="submit" busy={block.isPending} notPossible={complete ? null : "it needs a beginning, an end and a reason"}>Block time</Button>
        </form>
      )}
      {(block.error ?? unblock.error) && <p role="alert" className="small mt-2">{(block.error ?? unblock.error)?.message}</p>}
    </>
  );
}
