"use client";

import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { useState, type FormEvent } from "react";
import { Button } from "@/components/ui/button";
import { ConfirmDialog } from "@/components/ui/dialog";
import { TextField } from "@/components/ui/field";
import { Loading, Problem } from "@/components/ui/states";
import { fetchJson } from "@/lib/http/fetch-json";
import { NO_VALUE } from "@/lib/format";
import { formatDay, formatDayTime } from "@/lib/format-time";
import { tokensOptions } from "@/lib/rigs/client";
import { tokenCreated, type RigAnswer, type TokenAnswer } from "@/lib/rigs/schema";
import { created } from "@/lib/schema";

/** Tokens of the rig's agent: a new one stands between two ink lines until the page is left, and nowhere afterwards. */
export function AgentTokens({ rig }: { rig: RigAnswer }) {
  const { data, error, refetch, dataUpdatedAt } = useQuery(tokensOptions(rig.id));
  const queries = useQueryClient();
  const [name, setName] = useState("");
  const make = useMutation({
    mutationFn: () => fetchJson(`/api/rigs/${rig.id}/tokens`, { method: "POST", body: { name }, answer: tokenCreated }),
    onSuccess: async () => {
      setName("");
      await queries.invalidateQueries({ queryKey: ["rigs", "tokens", rig.id] });
    },
  });
  const submit = (event: FormEvent) => {
    event.preventDefault();
    make.mutate();
  };
  return (
    <>
      {make.data && (
        <div role="status" className="mb-4 border-y-2 border-ink py-3">
          <p className="small">The new token. Copy it now: it is shown this once.</p>
          <code className="mt-1 block select-all text-[15px] break-all">{make.data.token}</code>
        </div>
      )}
      {!data ? error ? <Problem error={error} onRetry={() => void refetch()} /> : <Loading label="the tokens" /> : <TokenList tokens={data.items} rig={rig} asOf={dataUpdatedAt} />}
      <form className="mt-4 flex max-w-[34em] flex-wrap items-end gap-3" onSubmit={submit}>
        <TextField className="flex-1" label="New token for" hint="The computer or program that will use it" value={name} onChange={(event) => setName(event.target.value)} error={make.error?.message} />
        <Button type="submit" busy={make.isPending} notPossible={name.trim() ? null : "it needs a name"}>Make token</Button>
      </form>
    </>
  );
}

function TokenList({ tokens, rig, asOf }: { tokens: readonly TokenAnswer[]; rig: RigAnswer; asOf: number }) {
  const [withdrawing, setWithdrawing] = useState<TokenAnswer | null>(null);
  const queries = useQueryClient();
  const withdraw = useMutation({
    mutationFn: (token: TokenAnswer) => fetchJson(`/api/rigs/${rig.id}/tokens/${token.id}/withdraw`, { method: "POST", body: {}, answer: created }),
    onSuccess: async () => {
      setWithdrawing(null);
      await queries.invalidateQueries({ queryKey: ["rigs", "tokens", rig.id] });
    },
  });
  if (tokens.length === 0) return <p className="text-ink2">No agent can reach this rig yet.</p>;
  return (
    <div className="scroll">
      <table className="data-table">
        <thead>
          <tr>
            <th scope="col">For</th>
            <th scope="col">Ends in</th>
            <th scope="col">Made</th>
            <th scope="col">Last used</th>
            <th scope="col"><span className="visually-hidden">Verbs</span></th>
          </tr>
        </thead>
        <tbody>
          {tokens.map((token) => (
            <tr key={token.id} className={token.revokedAt ? "text-ink3" : undefined}>
              <td>{token.name}</td>
              <td className="num">…{token.last4}</td>
              <td>{formatDay(token.createdAt, rig.timeZone, asOf)}{token.createdBy && `, ${token.createdBy}`}</td>
              <td className="num">{token.lastUsedAt ? formatDayTime(token.lastUsedAt, rig.timeZone, asOf) : NO_VALUE}</td>
              <td className="right">{token.revokedAt ? `withdrawn ${formatDay(token.revokedAt, rig.timeZone, asOf)}` : <Button small onClick={() => setWithdrawing(token)}>Withdraw</Button>}</td>
            </tr>
          ))}
        </tbody>
      </table>
      <ConfirmDialog
        open={withdrawing !== null}
        onOpenChange={(open) => !open && setWithdrawing(null)}
        title={`Withdraw the token for ${withdrawing?.name ?? ""}?`}
        cost={`Whatever uses it is refused from the next call on; the campaign on ${rig.name} then waits for another agent.`}
        keep="Keep it"
        act="Withdraw"
        onAct={() => withdrawing && withdraw.mutate(withdrawing)}
        busy={withdraw.isPending}
      >
        {withdraw.error && <p role="alert">{withdraw.error.message}</p>}
      </ConfirmDialog>
    </div>
  );
}
