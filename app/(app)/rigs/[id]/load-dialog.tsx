"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { useRef } from "react";
import { useForm, useWatch } from "react-hook-form";
import type { z } from "zod";
import { asNumber } from "@/components/ui/as-number";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { NumberField, Option, OptionGroup } from "@/components/ui/field";
import { showProblem } from "@/components/ui/show-problem";
import { Loading, Problem } from "@/components/ui/states";
import { fetchJson, ProblemError } from "@/lib/http/fetch-json";
import { lotsOptions } from "@/lib/liquids/client";
import { loadBody, type PortAnswer, type RigAnswer } from "@/lib/rigs/schema";
import { created } from "@/lib/schema";
import type { Unsent } from "../../outbox/unsent";
import { LotField } from "./lot-field";

type Values = z.input<typeof loadBody>;

type LoadDialogProps = { rig: RigAnswer; port: PortAnswer; onClose: () => void; /** Takes what nothing answered, to send it later. */ onKeep?: (unsent: Unsent) => void };

/** Records a bottle on a port; another lot of the same liquid in mid-campaign is asked for once more. */
export function LoadDialog({ rig, port, onClose, onKeep }: LoadDialogProps) {
  const { data: lots, error: lotsError, refetch } = useQuery(lotsOptions());
  const queries = useQueryClient();
  const { register, handleSubmit, setError, setValue, control, formState } = useForm<Values>({
    resolver: zodResolver(loadBody),
    defaultValues: { port: port.number, how: "replace", lotId: port.bottle?.lotId ?? "" },
  });
  const { errors } = formState;
  const how = useWatch({ control, name: "how" });
  const key = useRef(crypto.randomUUID());
  const path = `/api/rigs/${rig.id}/loads`;
  const save = useMutation({
    networkMode: "always",
    mutationFn: (load: Values) => fetchJson(path, { method: "POST", body: load, answer: created, idempotencyKey: key.current }),
    onSuccess: async () => {
      await Promise.all(["rigs", "tasks", "today", "campaigns"].map((name) => queries.invalidateQueries({ queryKey: [name] })));
      onClose();
    },
    onError: (error, load) => {
      if (onKeep && error instanceof ProblemError && error.code === "offline") return onKeep({ path, body: load, key: key.current });
      key.current = crypto.randomUUID();
      showProblem(error, setError);
    },
  });
  const asksForAnotherLot = save.error instanceof ProblemError && save.error.code === "other-lot";
  const submit = (confirm: boolean) => handleSubmit((load) => save.mutate(confirm ? { ...load, confirm } : load));

  return (
    <Dialog open onOpenChange={(open) => !open && onClose()} title={`Port ${port.number} of ${rig.name}`} description={port.bottle ? `${port.bottle.liquidName}, lot ${port.bottle.lotCode}, stands there now.` : "Nothing stands there now."}>
      {!lots ? (
        lotsError ? <Problem error={lotsError} onRetry={() => void refetch()} /> : <Loading label="the lots" />
      ) : (
        <form className="mt-3 grid gap-4" onSubmit={(event) => void submit(false)(event)} noValidate>
          <OptionGroup legend="What was done">
            <Option type="radio" value="replace" {...register("how")}>A new bottle was put on</Option>
            {port.bottle && <Option type="radio" value="topUp" note="same lot only" {...register("how")}>The bottle was topped up</Option>}
          </OptionGroup>
          <LotField lots={lots.items} bottle={port.bottle} timeZone={rig.timeZone} error={errors.lotId && "Give the lot on the bottle"} onChange={(lotId) => setValue("lotId", lotId, { shouldValidate: formState.isSubmitted })} />
          <NumberField label={how === "topUp" ? "Volume added" : "Volume in the bottle"} hint="mL" error={errors.volumeMl?.message} {...register("volumeMl", asNumber)} />
          {errors.root && <p role="alert" className="font-medium">{errors.root.message}</p>}
          <div className="buttons">
            {asksForAnotherLot ? (
              <Button look="primary" busy={save.isPending} onClick={() => void submit(true)()}>Yes, this lot</Button>
            ) : (
              <Button type="submit" look="primary" busy={save.isPending}>Bottle loaded</Button>
            )}
            <Button look="link" onClick={onClose}>Cancel</Button>
          </div>
        </form>
      )}
    </Dialog>
  );
}
