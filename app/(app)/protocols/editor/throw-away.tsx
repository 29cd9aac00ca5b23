"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { ConfirmDialog } from "@/components/ui/dialog";
import { Problem } from "@/components/ui/states";
import { throwDraftAway } from "@/lib/protocols/client";
import type { Draft } from "@/lib/protocols/draft";
import type { DraftSaver } from "@/lib/protocols/draft-saver";

/** Ends the writing: the saved versions stay, the draft is lost. */
export function ThrowAway({ draft, saver, version }: { draft: Draft; saver: DraftSaver; version: number }) {
  const router = useRouter();
  const queries = useQueryClient();
  const [asks, setAsks] = useState(false);
  const act = useMutation({
    mutationFn: async () => {
      await saver.close();
      const { id } = saver.get();
      if (id !== null) await throwDraftAway(id, version === 0);
      return id;
    },
    onSuccess: async (id) => {
      queries.removeQueries({ queryKey: ["protocols"] });
      router.push(id !== null && version > 0 ? `/protocols/${id}` : "/protocols");
    },
    onError: () => saver.reopen(draft),
  });
  return (
    <>
      <Button look="link" onClick={() => setAsks(true)}>Throw away</Button>
      <ConfirmDialog
        open={asks}
        onOpenChange={setAsks}
        title={`Throw the draft of version ${version + 1} away?`}
        cost={version === 0 ? "Nothing of it is in a version yet; what was written is lost." : `What was written since version ${version} is lost. Version ${version} stays.`}
        keep="Write on"
        act="Throw away"
        busy={act.isPending}
        onAct={() => act.mutate()}
      >
        {act.error && <Problem title={act.error.message} error={act.error} />}
      </ConfirmDialog>
    </>
  );
}
