"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useMemo } from "react";
import { Button } from "@/components/ui/button";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Empty, Problem } from "@/components/ui/states";
import { capitalised } from "@/lib/format";
import { formatDayTime } from "@/lib/format-time";
import { fetchJson } from "@/lib/http/fetch-json";
import { invitationsOptions } from "@/lib/people/client";
import { invitedAnswer, type InvitationAnswer } from "@/lib/people/schema";

type Act = { invitation: InvitationAnswer; act: "send again" | "withdraw" };

function useInvitation() {
  const queries = useQueryClient();
  return useMutation({
    mutationFn: async ({ invitation: { id, email, name, role }, act }: Act) => {
      if (act === "withdraw") await fetchJson(`/api/invitations/${id}/withdraw`, { method: "POST" });
      else await fetchJson("/api/invitations", { method: "POST", body: { email, name, role }, answer: invitedAnswer });
    },
    onSettled: () => queries.invalidateQueries({ queryKey: invitationsOptions().queryKey }),
  });
}

type Props = { invitations: readonly InvitationAnswer[]; zone: string; now: string };

export function InvitationsTable({ invitations, zone, now }: Props) {
  const { mutate, isPending, error, reset } = useInvitation();

  const columns = useMemo<readonly TableColumn<InvitationAnswer>[]>(
    () => [
      { id: "email", head: "E-mail", slot: "a", cell: ({ email }) => email },
      { id: "role", head: "Role", slot: "c", cell: ({ role }) => capitalised(role) },
      { id: "by", head: "Invited by", slot: "x", cell: ({ invitedBy }) => invitedBy },
      { id: "sent", head: "Sent", align: "right", slot: "x", cell: ({ createdAt }) => <span className="num">{formatDayTime(createdAt, zone, now)}</span> },
      {
        id: "until",
        head: "Good until",
        align: "right",
        slot: "d",
        cell: ({ expiresAt, state }) =>
          state === "expired" ? <b className="num">ran out {formatDayTime(expiresAt, zone, now)}</b> : <span className="num">{formatDayTime(expiresAt, zone, now)}</span>,
      },
      {
        id: "act",
        head: "",
        align: "right",
        slot: "w",
        cell: (invitation) => (
          <>
            <Button small busy={isPending} onClick={() => mutate({ invitation, act: "send again" })}>Send again</Button>{" "}
            <Button small look="link" busy={isPending} onClick={() => mutate({ invitation, act: "withdraw" })}>Withdraw</Button>
          </>
        ),
      },
    ],
    [zone, now, isPending, mutate],
  );

  return (
    <>
      {error && <Problem error={error} onRetry={reset} retry="Put away" />}
      <DataTable label="Invitations" columns={columns} rows={invitations} rowKey={({ id }) => id} empty={<Empty>No invitation is open.</Empty>} />
    </>
  );
}
