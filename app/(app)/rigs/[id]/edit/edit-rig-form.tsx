"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import { asNumber, orNull } from "@/components/ui/as-number";
import { Button, LinkButton } from "@/components/ui/button";
import { NumberField, Option, TextField } from "@/components/ui/field";
import { showProblem } from "@/components/ui/show-problem";
import { fetchJson } from "@/lib/http/fetch-json";
import { rigAnswer, rigChange, type RigAnswer } from "@/lib/rigs/schema";

type Values = z.input<typeof rigChange>;
type Change = z.output<typeof rigChange>;

export function EditRigForm({ rig }: { rig: RigAnswer }) {
  const router = useRouter();
  const queries = useQueryClient();
  const { register, handleSubmit, setError, formState: { errors } } = useForm<Values, unknown, Change>({
    resolver: zodResolver(rigChange),
    defaultValues: { name: rig.name, timeZone: rig.timeZone, ports: rig.ports.length, wasteCapacityMl: rig.wasteCapacityMl, retired: rig.retiredAt !== null },
  });
  const save = useMutation({
    mutationFn: (change: Change) => fetchJson(`/api/rigs/${rig.id}`, { method: "PATCH", body: change, answer: rigAnswer }),
    onSuccess: async () => {
      await queries.invalidateQueries({ queryKey: ["rigs"] });
      router.push(`/rigs/${rig.id}`);
      router.refresh();
    },
    onError: (error) => showProblem(error, setError),
  });
  return (
    <form className="grid max-w-[30em] gap-4" onSubmit={(event) => void handleSubmit((change) => save.mutate(change))(event)} noValidate>
      <TextField label="Name" error={errors.name?.message} {...register("name")} />
      <TextField label="Time zone" hint="IANA name; it stays while a campaign is on the rig or in its line" error={errors.timeZone?.message} {...register("timeZone")} />
      <NumberField label="Ports" hint="Numbered inlets, 0 to 99; one that is in use stays" error={errors.ports?.message} {...register("ports", asNumber)} />
      <NumberField label="Waste container" hint="mL; leave empty if nobody measured it" error={errors.wasteCapacityMl?.message} {...register("wasteCapacityMl", orNull(asNumber))} />
      <Option type="checkbox" note="it takes no more campaigns; all that it did stays" {...register("retired")}>Retired</Option>
      {errors.root && <p className="font-medium" role="alert">{errors.root.message}</p>}
      <div className="buttons">
        <Button type="submit" look="primary" busy={save.isPending}>Save</Button>
        <LinkButton look="link" href={`/rigs/${rig.id}`}>Cancel</LinkButton>
      </div>
    </form>
  );
}
