"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useForm } from "react-hook-form";
import { z } from "zod";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { SelectField, TextField } from "@/components/ui/field";
import { ShownOnce } from "@/components/ui/shown-once";
import { Problem } from "@/components/ui/states";
import { fetchJson } from "@/lib/http/fetch-json";
import { ownTokensOptions } from "@/lib/people/client";
import { newTokenAnswer, tokenBody } from "@/lib/people/schema";

const DAY_MS = 24 * 3600 * 1000;

const form = tokenBody.pick({ name: true, scope: true }).extend({ days: z.enum(["30", "90", "365", "none"]) });
type Form = z.output<typeof form>;

export function NewTokenDialog({ open, onOpenChange }: { open: boolean; onOpenChange: (open: boolean) => void }) {
  const queries = useQueryClient();
  const { register, handleSubmit, reset, formState } = useForm<z.input<typeof form>, unknown, Form>({
    resolver: zodResolver(form),
    defaultValues: { name: "", scope: "read", days: "90" },
  });
  const make = useMutation({
    mutationFn({ name, scope, days }: Form) {
      const expiresAt = days === "none" ? undefined : new Date(Date.now() + Number(days) * DAY_MS).toISOString();
      return fetchJson("/api/tokens", { method: "POST", body: { name, scope, expiresAt }, answer: newTokenAnswer });
    },
    onSuccess: () => queries.invalidateQueries({ queryKey: ownTokensOptions().queryKey }),
  });
  const close = (next: boolean) => {
    onOpenChange(next);
    if (next) return;
    reset();
    make.reset();
  };

  if (make.data) {
    return (
      <Dialog open={open} onOpenChange={close} wide title="The new token" description="It is shown this once and kept as a hash.">
        <ShownOnce secret={make.data.token} onPutAway={() => close(false)} />
      </Dialog>
    );
  }
  return (
    <Dialog open={open} onOpenChange={close} title="Make a token">
      <form className="mt-3 grid gap-3" onSubmit={(event) => void handleSubmit((given) => make.mutate(given))(event)}>
        <TextField label="What for" placeholder="plots on the office computer" error={formState.errors.name?.message} {...register("name")} />
        <SelectField label="May" {...register("scope")}>
          <option value="read">only read</option>
          <option value="write">do what you may</option>
        </SelectField>
        <SelectField label="Good for" {...register("days")}>
          <option value="30">30 days</option>
          <option value="90">90 days</option>
          <option value="365">a year</option>
          <option value="none">until it is withdrawn</option>
        </SelectField>
        {make.error && <Problem error={make.error} />}
        <div className="buttons">
          <Button look="primary" type="submit" busy={make.isPending}>Make it</Button>
          <Button onClick={() => close(false)}>Later</Button>
        </div>
      </form>
    </Dialog>
  );
}
