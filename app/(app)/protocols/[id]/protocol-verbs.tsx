"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { Button, LinkButton } from "@/components/ui/button";
import { ConfirmDialog } from "@/components/ui/dialog";
import { Problem } from "@/components/ui/states";
import { fetchJson } from "@/lib/http/fetch-json";
import { may, type Role } from "@/lib/permissions";
import type { ProtocolAnswer } from "@/lib/protocols/schema";

/** What may be done with a protocol: queue this version, write the next, retire, bring back. Viewers see none. */
export function ProtocolVerbs({ protocol, versionId, role }: { protocol: ProtocolAnswer; versionId: string | null; role: Role }) {
  const router = useRouter();
  const queries = useQueryClient();
  const [asks, setAsks] = useState(false);
  const isOnlyDraft = protocol.versions.length === 0;
  const change = useMutation({
    mutationFn: (verb: "retire" | "bring-back" | "delete") =>
      verb === "delete" ? fetchJson(`/api/protocols/${protocol.id}`, { method: "DELETE" }) : fetchJson(`/api/protocols/${protocol.id}/${verb}`, { method: "POST", body: {} }),
    onSuccess: async (_, verb) => {
      setAsks(false);
      if (verb === "delete") router.push("/protocols");
      await queries.invalidateQueries({ queryKey: ["protocols", ...(verb === "delete" ? ["list"] : [])] });
    },
  });
  if (!may(role, "edit protocols")) return null;
  if (protocol.retiredAt) return <><Button busy={change.isPending} onClick={() => change.mutate("bring-back")}>Bring back</Button>{change.error && <span role="alert">{change.error.message}</span>}</>;
  return (
    <>
      {versionId && may(role, "edit campaigns") && <LinkButton look="primary" href={`/campaigns/new?version=${versionId}`}>Queue a campaign</LinkButton>}
      <LinkButton look={isOnlyDraft ? "primary" : "plain"} href={`/protocols/${protocol.id}/edit`}>{protocol.draft ? "Go on with the draft" : "New version"}</LinkButton>
      <Button look="link" onClick={() => setAsks(true)}>{isOnlyDraft ? "Delete" : "Retire"}</Button>
      <ConfirmDialog
        open={asks}
        onOpenChange={setAsks}
        title={isOnlyDraft ? `Delete the draft of ${protocol.name}?` : `Retire ${protocol.name}?`}
        cost={isOnlyDraft ? "It has no version yet; what was written is lost." : "It can no longer be chosen for a new campaign. Its versions and the campaigns that followed them stay, and it can be brought back."}
        keep="Keep it"
        act={isOnlyDraft ? "Delete" : "Retire"}
        busy={change.isPending}
        onAct={() => change.mutate(isOnlyDraft ? "delete" : "retire")}
      >
        {change.error && <Problem title={change.error.message} error={change.error} />}
      </ConfirmDialog>
    </>
  );
}
