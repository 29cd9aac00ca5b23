"use client";

import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { TextAreaField } from "@/components/ui/field";
import { Head } from "@/components/ui/page";
import { Loading, Problem } from "@/components/ui/states";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { notesOptions } from "@/lib/campaigns/client";
import { noteAnswer } from "@/lib/campaigns/notes-schema";
import { formatRecent } from "@/lib/format-time";
import { fetchJson } from "@/lib/http/fetch-json";
import { may, type Role } from "@/lib/permissions";

/** What the team wrote about the run, the newest first. A note stays as it was written. */
export function Notes({ campaign: { id, timeZone }, role }: { campaign: CampaignAnswer; role: Role }) {
  const { data, error, refetch, dataUpdatedAt } = useQuery(notesOptions(id));
  const [draft, setDraft] = useState<string>();
  const queries = useQueryClient();
  const add = useMutation({
    mutationFn: (text: string) => fetchJson(`/api/campaigns/${id}/notes`, { method: "POST", body: { text }, answer: noteAnswer }),
    onSuccess: async () => {
      setDraft(undefined);
      await queries.invalidateQueries({ queryKey: notesOptions(id).queryKey });
    },
  });
  return (
    <div>
      <Head>Team notes</Head>
      {error && <Problem error={error} onRetry={() => void refetch()} />}
      {!data && !error && <Loading label="the notes" />}
      {data?.items.length === 0 && <p className="small text-ink2">Nobody has written a note yet.</p>}
      <ul className="grid gap-3">
        {data?.items.map((note) => (
          <li key={note.id}>
            <p className="whitespace-pre-line [overflow-wrap:anywhere]">{note.text}</p>
            <p className="small text-ink2">{note.by}, {note.role}, {formatRecent(note.at, timeZone, dataUpdatedAt)}</p>
          </li>
        ))}
      </ul>
      {may(role, "write notes") &&
        (draft === undefined ? (
          <div className="buttons mt-3"><Button small onClick={() => setDraft("")}>Add a note</Button></div>
        ) : (
          <form
            className="mt-3 grid gap-3"
            onSubmit={(event) => {
              event.preventDefault();
              if (draft.trim()) add.mutate(draft);
            }}
          >
            <TextAreaField label="Note" hint="It stays as it is written, with your name." rows={3} maxLength={5000} autoFocus value={draft} onChange={(event) => setDraft(event.target.value)} error={add.error?.message} />
            <div className="buttons">
              <Button type="submit" small look="primary" busy={add.isPending} notPossible={draft.trim() ? null : "nothing is written yet"}>Add the note</Button>
              <Button small look="link" onClick={() => setDraft(undefined)}>Leave it</Button>
            </div>
          </form>
        ))}
    </div>
  );
}
