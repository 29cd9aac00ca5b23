"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import { Button } from "@/components/ui/button";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { ConfirmDialog } from "@/components/ui/dialog";
import { Problem } from "@/components/ui/states";
import { capitalised } from "@/lib/format";
import { formatAgo, formatDay, formatRecent } from "@/lib/format-time";
import { fetchJson } from "@/lib/http/fetch-json";
import { peopleOptions } from "@/lib/people/client";
import { personAnswer, type PersonAnswer } from "@/lib/people/schema";
import { ROLES } from "@/lib/permissions";

type Change = { person: PersonAnswer; role?: string; act?: "close" | "open" };

function useChangePerson() {
  const queries = useQueryClient();
  return useMutation({
    mutationFn: ({ person, role, act }: Change) =>
      act
        ? fetchJson(`/api/people/${person.id}/${act}`, { method: "POST", answer: personAnswer })
        : fetchJson(`/api/people/${person.id}`, { method: "PATCH", body: { role }, answer: personAnswer }),
    onSettled: () => queries.invalidateQueries({ queryKey: peopleOptions().queryKey }),
  });
}

export function PeopleTable({ people, myId, zone, now }: { people: readonly PersonAnswer[]; myId: string; zone: string; now: string }) {
  const { mutate, isPending, error, reset } = useChangePerson();
  const [leaving, setLeaving] = useState<PersonAnswer>();

  const columns = useMemo<readonly TableColumn<PersonAnswer>[]>(
    () => [
      {
        id: "name",
        head: "Name",
        slot: "a",
        cell: ({ id, name, closedAt }) => <span className={closedAt ? "text-ink3" : "font-semibold"}>{name}{id === myId && <span className="font-normal text-ink2"> you</span>}</span>,
      },
      {
        id: "role",
        head: "Role",
        slot: "c",
        cell: (person) =>
          person.closedAt || person.id === myId ? (
            <span className={person.closedAt ? "text-ink3" : undefined}>{capitalised(person.role)}</span>
          ) : (
            <select className="control" aria-label={`Role of ${person.name}`} value={person.role} disabled={isPending} onChange={(event) => mutate({ person, role: event.target.value })}>
              {ROLES.toReversed().map((role) => <option key={role} value={role}>{capitalised(role)}</option>)}
            </select>
          ),
      },
      { id: "email", head: "E-mail", slot: "w", cell: ({ email, closedAt }) => <span className={closedAt ? "text-ink3" : undefined}>{email}</span> },
      { id: "mail", head: "Mail of", slot: "x", cell: (person) => <span className={person.closedAt ? "text-ink3" : undefined}>{mailInWords(person)}</span> },
      { id: "seen", head: "Seen", align: "right", slot: "x", cell: ({ id, seenAt, closedAt }) => <span className={closedAt ? "num text-ink3" : "num"}>{seenInWords({ seenAt, now, zone, isMe: id === myId })}</span> },
      {
        id: "since",
        head: "Since",
        align: "right",
        slot: "d",
        cell: ({ createdAt, closedAt }) => <span className="num text-ink2">{closedAt ? `closed ${formatDay(closedAt, zone, now)}` : formatDay(createdAt, zone, now)}</span>,
      },
      {
        id: "act",
        head: "",
        align: "right",
        slot: "b",
        cell: (person) => {
          if (person.id === myId) return <span className="small text-ink3">another administrator closes you</span>;
          return person.closedAt ? (
            <Button small look="link" busy={isPending} onClick={() => mutate({ person, act: "open" })}>Open again</Button>
          ) : (
            <Button small look="link" onClick={() => setLeaving(person)}>Close</Button>
          );
        },
      },
    ],
    [myId, zone, now, isPending, mutate],
  );

  return (
    <>
      {error && <Problem error={error} onRetry={reset} retry="Put away" />}
      <DataTable label="People" columns={columns} rows={people} rowKey={({ id }) => id} />
      <ConfirmDialog
        open={leaving !== undefined}
        onOpenChange={(open) => !open && setLeaving(undefined)}
        title={`Close the account of ${leaving?.name ?? ""}?`}
        cost="Sessions and tokens end at once. The name stays on old records, and the account can be opened again."
        keep="Keep it open"
        act="Close the account"
        onAct={() => {
          if (leaving) mutate({ person: leaving, act: "close" });
          setLeaving(undefined);
        }}
      />
    </>
  );
}

function mailInWords({ notify, closedAt }: PersonAnswer): string {
  if (closedAt) return "none";
  return [notify.alarms && "alarms", notify.tasks && "tasks"].filter(Boolean).join(" and ") || "none";
}

const AN_HOUR_MS = 3_600_000;

function seenInWords({ seenAt, now, zone, isMe }: { seenAt: string | null; now: string; zone: string; isMe: boolean }): string {
  if (isMe) return "now";
  if (!seenAt) return "never";
  return Date.parse(now) - Date.parse(seenAt) < AN_HOUR_MS ? formatAgo(seenAt, now) : formatRecent(seenAt, zone, now);
}
