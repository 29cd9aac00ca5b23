"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useState } from "react";
import { Button, LinkButton } from "@/components/ui/button";
import { ConfirmDialog } from "@/components/ui/dialog";
import { TextField } from "@/components/ui/field";
import { fetchJson } from "@/lib/http/fetch-json";
import { may, type Role } from "@/lib/permissions";
import { heldAnswer, type RigAnswer } from "@/lib/rigs/schema";

/** Take over and give back: a person works at the rig by hand, its campaign waits. */
export function RigVerbs({ rig, role }: { rig: RigAnswer; role: Role }) {
  const [asking, setAsking] = useState(false);
  const [why, setWhy] = useState("");
  const queries = useQueryClient();
  const done = async () => {
    setAsking(false);
    await queries.invalidateQueries({ queryKey: ["rigs"] });
  };
  const takeOver = useMutation({
    mutationFn: () => fetchJson(`/api/rigs/${rig.id}/take-over`, { method: "POST", body: why.trim() ? { why } : {}, answer: heldAnswer }),
    onSuccess: done,
  });
  const giveBack = useMutation({
    mutationFn: () => fetchJson(`/api/rigs/${rig.id}/give-back`, { method: "POST", body: {}, answer: heldAnswer }),
    onSuccess: done,
  });
  const { campaign } = rig;
  return (
    <>
      {may(role, "edit campaigns") && <LinkButton href={`/campaigns/new?rig=${rig.id}`}>Queue a campaign</LinkButton>}
      {may(role, "edit rigs") && <LinkButton href={`/rigs/${rig.id}/edit`}>Edit</LinkButton>}
      {may(role, "take over rigs") &&
        (campaign?.takenOver ? (
          <Button look="primary" busy={giveBack.isPending} onClick={() => giveBack.mutate()}>Give back</Button>
        ) : (
          <Button notPossible={campaign ? null : "no campaign is on the rig"} onClick={() => setAsking(true)}>Take over</Button>
        ))}
      {giveBack.error && <p role="alert" className="small w-full">{giveBack.error.message}</p>}
      <ConfirmDialog
        open={asking}
        onOpenChange={setAsking}
        title={`Take over ${rig.name}?`}
        cost={`${campaign?.name ?? "Its campaign"} waits after the present repeat, and no step goes out until you give the rig back.`}
        keep="Let it run"
        act="Take over"
        onAct={() => takeOver.mutate()}
        busy={takeOver.isPending}
      >
        <TextField label="Why" hint="May be left out; it goes into the log" value={why} onChange={(event) => setWhy(event.target.value)} error={takeOver.error?.message} />
      </ConfirmDialog>
    </>
  );
}
