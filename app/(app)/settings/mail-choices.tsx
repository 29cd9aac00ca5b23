"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { Option, OptionGroup } from "@/components/ui/field";
import { Problem } from "@/components/ui/states";
import { fetchJson } from "@/lib/http/fetch-json";
import { meOptions } from "@/lib/people/client";
import { meAnswer, type MailWishes } from "@/lib/people/schema";

const CHOICES = [
  { wish: "alarms", label: "Alarms", note: "of every rig, when they open" },
  { wish: "tasks", label: "Tasks", note: "that cannot wait" },
] as const;

/** Each choice saves itself, and goes back where it was when that fails. */
export function MailChoices({ wishes }: { wishes: MailWishes }) {
  const queries = useQueryClient();
  const save = useMutation({
    mutationFn: (notify: Partial<MailWishes>) => fetchJson("/api/me", { method: "PATCH", body: { notify }, answer: meAnswer }),
    onSuccess: (me) => queries.setQueryData(meOptions().queryKey, me),
  });
  const shown = { ...(save.data?.notify ?? wishes), ...(save.isPending && save.variables) };
  return (
    <div className="grid max-w-90 gap-2">
      <OptionGroup legend="Tell me by mail of">
        {CHOICES.map(({ wish, label, note }) => (
          <Option key={wish} type="checkbox" note={note} checked={shown[wish]} disabled={save.isPending} onChange={(event) => save.mutate({ [wish]: event.target.checked })}>
            {label}
          </Option>
        ))}
      </OptionGroup>
      {save.error && <Problem error={save.error} />}
      <span className="small text-ink2" role="status">{save.isSuccess && "Saved"}</span>
    </div>
  );
}
