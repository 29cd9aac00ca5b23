"use client";

import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import { Button } from "@/components/ui/button";
import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Empty, Problem } from "@/components/ui/states";
import { formatDay, formatRecent } from "@/lib/format-time";
import { fetchJson } from "@/lib/http/fetch-json";
import { ownTokensOptions } from "@/lib/people/client";
import { tokenAnswer, type TokenAnswer } from "@/lib/people/schema";
import { NewTokenDialog } from "./new-token-dialog";

export function TokensPanel({ zone, now }: { zone: string; now: string }) {
  const queries = useQueryClient();
  const [making, setMaking] = useState(false);
  const tokens = useQuery(ownTokensOptions());
  const { mutate, isPending, error } = useMutation({
    mutationFn: (id: string) => fetchJson(`/api/tokens/${id}/withdraw`, { method: "POST", answer: tokenAnswer }),
    onSettled: () => queries.invalidateQueries({ queryKey: ownTokensOptions().queryKey }),
  });

  const columns = useMemo<readonly TableColumn<TokenAnswer>[]>(
    () => [
      { id: "name", head: "Token", slot: "a", cell: ({ name, withdrawnAt }) => <span className={withdrawnAt ? "text-ink3" : "font-semibold"}>{name}</span> },
      { id: "scope", head: "May", slot: "c", cell: ({ scope }) => (scope === "read" ? "only read" : "do what you may") },
      { id: "last4", head: "Ends in", slot: "x", cell: ({ last4 }) => <span className="num">…{last4}</span> },
      { id: "used", head: "Last used", align: "right", slot: "d", cell: ({ lastUsedAt }) => <span className="num">{lastUsedAt ? formatRecent(lastUsedAt, zone, now) : "never"}</span> },
      {
        id: "until",
        head: "Good until",
        align: "right",
        slot: "x",
        cell: ({ expiresAt, withdrawnAt }) => (
          <span className="num">{withdrawnAt ? `withdrawn ${formatDay(withdrawnAt, zone, now)}` : expiresAt ? formatDay(expiresAt, zone, now) : "it is withdrawn"}</span>
        ),
      },
      {
        id: "act",
        head: "",
        align: "right",
        slot: "b",
        cell: ({ id, withdrawnAt }) => !withdrawnAt && <Button small look="link" busy={isPending} onClick={() => mutate(id)}>Withdraw</Button>,
      },
    ],
    [zone, now, isPending, mutate],
  );

  return (
    <>
      {(error ?? tokens.error) && <Problem error={error ?? tokens.error} />}
      <DataTable label="Tokens for scripts" columns={columns} rows={tokens.data?.items} rowKey={({ id }) => id} empty={<Empty>You have made no token yet.</Empty>} />
      <div className="buttons mt-3"><Button onClick={() => setMaking(true)}>Make a token</Button></div>
      <NewTokenDialog open={making} onOpenChange={setMaking} />
    </>
  );
}
