"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { Problem } from "@/components/ui/states";
import { fetchJson, ProblemError } from "@/lib/http/fetch-json";
import type { Laboratory } from "@/lib/laboratory";
import { laboratoryAnswer } from "@/lib/laboratory-settings/schema";
import { meOptions } from "@/lib/people/client";

export function LaboratoryForm({ laboratory, timeZones }: { laboratory: Laboratory; timeZones: readonly string[] }) {
  const queries = useQueryClient();
  const router = useRouter();
  const save = useMutation({
    mutationFn: (body: Laboratory) => fetchJson("/api/laboratory", { method: "PATCH", body, answer: laboratoryAnswer }),
    async onSuccess() {
      await queries.invalidateQueries({ queryKey: meOptions().queryKey });
      router.refresh();
    },
  });
  const fields = save.error instanceof ProblemError ? save.error.fields : [];
  const fault = (path: keyof Laboratory) => fields.find((field) => field.path === path)?.message;
  return (
    <form
      className="grid max-w-90 gap-3"
      onSubmit={(event) => {
        event.preventDefault();
        const given = new FormData(event.currentTarget);
        save.mutate({ name: String(given.get("name")), timeZone: String(given.get("timeZone")) });
      }}
    >
      <TextField label="Name" name="name" defaultValue={laboratory.name} autoComplete="organization" required maxLength={200} error={fault("name")} />
      <TextField label="Time zone" name="timeZone" defaultValue={laboratory.timeZone} list="time-zones" autoComplete="off" spellCheck={false} required maxLength={100} hint="A name as Europe/Berlin" error={fault("timeZone")} />
      <datalist id="time-zones">
        {timeZones.map((zone) => <option key={zone} value={zone} />)}
      </datalist>
      {save.error && fields.length === 0 && <Problem error={save.error} />}
      <div className="buttons">
        <Button type="submit" busy={save.isPending}>Save</Button>
        <span className="small text-ink2" role="status">{save.isSuccess && "Saved"}</span>
      </div>
    </form>
  );
}
