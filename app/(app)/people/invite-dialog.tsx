"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import { ShownOnce } from "@/components/ui/shown-once";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { SelectField, TextField } from "@/components/ui/field";
import { Problem } from "@/components/ui/states";
import { capitalised } from "@/lib/format";
import { fetchJson } from "@/lib/http/fetch-json";
import { invitationsOptions } from "@/lib/people/client";
import { invitationBody, invitedAnswer } from "@/lib/people/schema";
import { ROLES } from "@/lib/permissions";

type Body = z.output<typeof invitationBody>;

export function InviteDialog({ open, onOpenChange }: { open: boolean; onOpenChange: (open: boolean) => void }) {
  const queries = useQueryClient();
  const { register, handleSubmit, reset, formState } = useForm<z.input<typeof invitationBody>, unknown, Body>({
    resolver: zodResolver(invitationBody),
    defaultValues: { email: "", name: "", role: "operator" },
  });
  const send = useMutation({
    mutationFn: (body: Body) => fetchJson("/api/invitations", { method: "POST", body, answer: invitedAnswer }),
    onSuccess: () => queries.invalidateQueries({ queryKey: invitationsOptions().queryKey }),
  });
  const close = (next: boolean) => {
    onOpenChange(next);
    if (next) return;
    reset();
    send.reset();
  };

  if (send.data) {
    return (
      <Dialog open={open} onOpenChange={close} wide title="The invitation is on its way" description="The link is in the mail. It can be handed over as well; it is shown this once.">
        <ShownOnce secret={send.data.link} onPutAway={() => close(false)} />
      </Dialog>
    );
  }
  return (
    <Dialog open={open} onOpenChange={close} title="Invite a person" description="A link goes by mail, for this person alone, good for seven days.">
      <form className="mt-3 grid gap-3" onSubmit={(event) => void handleSubmit((body) => send.mutate(body))(event)}>
        <TextField label="E-mail" type="email" autoComplete="off" error={formState.errors.email?.message} {...register("email")} />
        <TextField label="Name" autoComplete="off" error={formState.errors.name?.message} {...register("name")} />
        <SelectField label="Role" {...register("role")}>
          {ROLES.toReversed().map((role) => <option key={role} value={role}>{capitalised(role)}</option>)}
        </SelectField>
        {send.error && <Problem error={send.error} />}
        <div className="buttons">
          <Button look="primary" type="submit" busy={send.isPending}>Send the invitation</Button>
          <Button onClick={() => close(false)}>Later</Button>
        </div>
      </form>
    </Dialog>
  );
}
