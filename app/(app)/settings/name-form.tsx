"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { fetchJson, ProblemError } from "@/lib/http/fetch-json";
import { meOptions } from "@/lib/people/client";
import { meAnswer } from "@/lib/people/schema";

export function NameForm({ name }: { name: string }) {
  const queries = useQueryClient();
  const router = useRouter();
  const save = useMutation({
    mutationFn: (next: string) => fetchJson("/api/me", { method: "PATCH", body: { name: next }, answer: meAnswer }),
    onSuccess(me) {
      queries.setQueryData(meOptions().queryKey, me);
      router.refresh();
    },
  });
  const fault = save.error instanceof ProblemError ? (save.error.fields[0]?.message ?? save.error.detail) : undefined;
  return (
    <form
      className="grid max-w-90 gap-3"
      onSubmit={(event) => {
        event.preventDefault();
        save.mutate(String(new FormData(event.currentTarget).get("name")));
      }}
    >
      <TextField label="Name" name="name" defaultValue={name} autoComplete="name" required maxLength={200} error={fault} />
      <div className="buttons">
        <Button type="submit" busy={save.isPending}>Save</Button>
        <span className="small text-ink2" role="status">{save.isSuccess && "Saved"}</span>
      </div>
    </form>
  );
}
