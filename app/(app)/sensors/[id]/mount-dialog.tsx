"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useInfiniteQuery, useMutation, useQueryClient } from "@tanstack/react-query";
import { useRef } from "react";
import { useForm, useWatch } from "react-hook-form";
import type { z } from "zod";
import { asNumber, orNothing } from "@/components/ui/as-number";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { NumberField, SelectField, TextAreaField } from "@/components/ui/field";
import { showProblem } from "@/components/ui/show-problem";
import { Loading, Problem } from "@/components/ui/states";
import { fetchJson, ProblemError } from "@/lib/http/fetch-json";
import { mountBody } from "@/lib/mounts/schema";
import { rigsOptions } from "@/lib/rigs/client";
import { created } from "@/lib/schema";
import type { SensorAnswer } from "@/lib/sensors/schema";
import type { Unsent } from "../../outbox/unsent";

type Values = z.input<typeof mountBody>;
type Mount = z.output<typeof mountBody>;

type MountDialogProps = { sensor: SensorAnswer; rigId?: string; onClose: () => void; /** Takes what nothing answered, to send it later. */ onKeep?: (unsent: Unsent) => void };

/** Records that the sensor was clamped in a rig just now. */
export function MountDialog({ sensor, rigId: wanted, onClose, onKeep }: MountDialogProps) {
  const rigs = useInfiniteQuery(rigsOptions());
  const queries = useQueryClient();
  const { register, handleSubmit, setError, control, formState } = useForm<Values, unknown, Mount>({
    resolver: zodResolver(mountBody),
    defaultValues: { rigId: wanted ?? sensor.mount?.rigId ?? "", position: 1 },
  });
  const { errors } = formState;
  const rigId = useWatch({ control, name: "rigId" });
  const key = useRef(crypto.randomUUID());
  const path = `/api/sensors/${sensor.id}/mounts`;
  const save = useMutation({
    networkMode: "always",
    mutationFn: (mount: Mount) => fetchJson(path, { method: "POST", body: mount, answer: created, idempotencyKey: key.current }),
    onSuccess: async () => {
      await Promise.all(["sensors", "rigs", "tasks", "today", "campaigns"].map((name) => queries.invalidateQueries({ queryKey: [name] })));
      onClose();
    },
    onError: (error, mount) => {
      if (onKeep && error instanceof ProblemError && error.code === "offline") return onKeep({ path, body: mount, key: key.current });
      key.current = crypto.randomUUID();
      showProblem(error, setError);
    },
  });
  return (
    <Dialog open onOpenChange={(open) => !open && onClose()} title={`Mount ${sensor.serial}`} description={consequence(sensor, rigId)}>
      {!rigs.data ? (
        rigs.error ? <Problem error={rigs.error} onRetry={() => void rigs.refetch()} /> : <Loading label="the rigs" />
      ) : (
        <form className="mt-3 grid gap-4" onSubmit={(event) => void handleSubmit((mount) => save.mutate(mount))(event)} noValidate>
          <SelectField label="Rig" error={errors.rigId && "Choose a rig"} {...register("rigId")}>
            <option value="">Choose a rig</option>
            {rigs.data.pages.flatMap(({ items }) => items).map(({ id, name }) => <option key={id} value={id}>{name}</option>)}
          </SelectField>
          <NumberField label="Position" hint="1 unless the rig has several" error={errors.position?.message} {...register("position", asNumber)} />
          <TextAreaField label="Note" hint="Clamp, torque, what was seen" error={errors.note?.message} {...register("note", orNothing)} />
          {errors.root && <p role="alert" className="font-medium">{errors.root.message}</p>}
          <div className="buttons">
            <Button type="submit" look="primary" busy={save.isPending}>Mounted</Button>
            <Button look="link" onClick={onClose}>Cancel</Button>
          </div>
        </form>
      )}
    </Dialog>
  );
}

function consequence({ mount, campaign, serial }: SensorAnswer, rigId: string): string {
  if (!mount) return "A mount begins a new baseline.";
  if (!rigId || rigId === mount.rigId) return `${serial} is mounted on ${mount.rigName}; clamping it anew begins a new baseline.`;
  return campaign ? `${serial} leaves ${mount.rigName}, and ${campaign.name} waits until it is back.` : `${serial} leaves ${mount.rigName}.`;
}
