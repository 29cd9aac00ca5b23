"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { fromZonedTime } from "date-fns-tz";
import { useForm, useWatch } from "react-hook-form";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { SelectField, TextField } from "@/components/ui/field";
import { showProblem } from "@/components/ui/show-problem";
import { fetchJson } from "@/lib/http/fetch-json";
import type { RigAnswer } from "@/lib/rigs/schema";
import { created } from "@/lib/schema";

type Values = { rigId: string; from: string; to: string; why: string };

type BlockTimeDialogProps = { rigs: readonly Pick<RigAnswer, "id" | "name" | "timeZone">[]; onClose: () => void };

/** Keeps a rig free for service, in its own time. */
export function BlockTimeDialog({ rigs, onClose }: BlockTimeDialogProps) {
  const queries = useQueryClient();
  const { register, handleSubmit, setError, control, formState: { errors } } = useForm<Values>({ defaultValues: { rigId: rigs.length === 1 ? rigs[0].id : "", from: "", to: "", why: "" } });
  const rigId = useWatch({ control, name: "rigId" });
  const rig = rigs.find(({ id }) => id === rigId);
  const block = useMutation({
    mutationFn: ({ rigId: on, from, to, why }: Values) => {
      const zone = rigs.find(({ id }) => id === on)?.timeZone ?? "UTC";
      const body = { from: fromZonedTime(from, zone).toISOString(), to: fromZonedTime(to, zone).toISOString(), why };
      return fetchJson(`/api/rigs/${on}/blocked-times`, { method: "POST", body, answer: created });
    },
    onSuccess: async () => {
      await queries.invalidateQueries({ queryKey: ["rigs"] });
      onClose();
    },
    onError: (error) => showProblem(error, setError),
  });
  return (
    <Dialog open onOpenChange={(open) => !open && onClose()} title={rigs.length === 1 ? `Block time on ${rigs[0].name}` : "Block time"} description="No queued campaign begins in blocked time. One that has begun goes on; pause it if the rig must be free.">
      <form className="mt-3 grid gap-4" onSubmit={(event) => void handleSubmit((values) => block.mutate(values))(event)} noValidate>
        {rigs.length > 1 && (
          <SelectField label="Rig" error={errors.rigId?.message} {...register("rigId", { required: "Choose a rig" })}>
            <option value="">Choose a rig</option>
            {rigs.map(({ id, name }) => <option key={id} value={id}>{name}</option>)}
          </SelectField>
        )}
        <TextField type="datetime-local" label="From" hint={rig ? `Time of ${rig.timeZone}` : "In the rig’s own time"} error={errors.from?.message} {...register("from", { required: "Say when it begins" })} />
        <TextField type="datetime-local" label="To" error={errors.to?.message} {...register("to", { required: "Say when it ends", validate: (to, { from }) => !from || to > from || "It must end after it begins" })} />
        <TextField label="Why" hint="It stands in the rig’s weeks: pump service" error={errors.why?.message} {...register("why", { validate: (why) => why.trim() !== "" || "Say why, for colleagues" })} />
        {errors.root && <p role="alert" className="font-medium">{errors.root.message}</p>}
        <div className="buttons">
          <Button type="submit" look="primary" busy={block.isPending}>Block time</Button>
          <Button look="link" onClick={onClose}>Cancel</Button>
        </div>
      </form>
    </Dialog>
  );
}
