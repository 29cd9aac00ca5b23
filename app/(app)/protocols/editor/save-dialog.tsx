"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { TextAreaField } from "@/components/ui/field";
import { Problem } from "@/components/ui/states";
import { ProblemError } from "@/lib/http/fetch-json";
import type { DefinitionError } from "@/lib/protocol/schema";
import { saveVersion } from "@/lib/protocols/client";
import type { Draft } from "@/lib/protocols/draft";
import type { DraftSaver } from "@/lib/protocols/draft-saver";

type SaveDialogProps = { draft: Draft; saver: DraftSaver; /** 0: there is none yet. */ version: number; onRefused: (errors: DefinitionError[]) => void; onClose: () => void };

/** Freezes the draft as the next version, with a note on what changed and why. */
export function SaveDialog({ draft, saver, version, onRefused, onClose }: SaveDialogProps) {
  const router = useRouter();
  const queries = useQueryClient();
  const [note, setNote] = useState("");
  const save = useMutation({
    mutationFn: async ({ anyway }: { anyway: boolean }) => {
      await saver.close();
      return saveVersion({ id: saver.get().id, definition: draft, note, basedOn: anyway || saver.get().id === null ? undefined : version });
    },
    onSuccess: async ({ id }) => {
      await queries.invalidateQueries({ queryKey: ["protocols"] });
      router.push(`/protocols/${id}`);
    },
    onError: (error) => {
      saver.reopen(draft);
      const found = refusals(error);
      if (found.length === 0) return;
      onRefused(found);
      onClose();
    },
  });
  const isNewer = save.error instanceof ProblemError && save.error.code === "newer-version";
  return (
    <Dialog open onOpenChange={(open) => !open && onClose()} title={`Save version ${version + 1}?`} description="It never changes again. Campaigns that run keep the version they have.">
      <div className="mt-3 grid gap-4">
        {version > 0 || saver.get().id !== null ? <TextAreaField label="What changed, and why" hint="May be left out" value={note} onChange={(event) => setNote(event.target.value)} maxLength={2000} /> : null}
        {save.error && <Problem title={save.error.message} error={save.error} />}
        <div className="buttons">
          <Button look="primary" busy={save.isPending} onClick={() => save.mutate({ anyway: isNewer })}>{isNewer ? "Save it on top all the same" : "Save version"}</Button>
          <Button look="link" onClick={onClose}>Write on</Button>
        </div>
      </div>
    </Dialog>
  );
}

/** What the server found wrong, at its fields. */
function refusals(error: Error): DefinitionError[] {
  if (!(error instanceof ProblemError)) return [];
  if (error.code === "already-there") return [{ path: "name", message: error.message }];
  return error.fields.map(({ path, message }) => ({ path: path.replace(/^definition\.?/, ""), message }));
}
