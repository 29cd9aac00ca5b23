"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import { asNumber } from "@/components/ui/as-number";
import { Button, LinkButton } from "@/components/ui/button";
import { NumberField, Option, OptionGroup, TextField } from "@/components/ui/field";
import { showProblem } from "@/components/ui/show-problem";
import { fetchJson } from "@/lib/http/fetch-json";
import { rigBody } from "@/lib/rigs/schema";
import { created } from "@/lib/schema";

type Values = z.input<typeof rigBody>;
type Rig = z.output<typeof rigBody>;

export function NewRigForm({ timeZone }: { timeZone: string }) {
  const router = useRouter();
  const queries = useQueryClient();
  const { register, handleSubmit, setError, formState } = useForm<Values, unknown, Rig>({
    resolver: zodResolver(rigBody),
    defaultValues: { name: "", timeZone, ports: 4, clock: "real" },
  });
  const { errors } = formState;
  const make = useMutation({
    mutationFn: (rig: Rig) => fetchJson("/api/rigs", { method: "POST", body: rig, answer: created }),
    onSuccess: async ({ id }) => {
      await queries.invalidateQueries({ queryKey: ["rigs"] });
      router.push(`/rigs/${id}`);
    },
    onError: (error) => showProblem(error, setError),
  });

  return (
    <form className="grid max-w-[30em] gap-4" onSubmit={(event) => void handleSubmit((rig) => make.mutate(rig))(event)} noValidate>
      <TextField label="Name" error={errors.name?.message} {...register("name")} />
      <TextField label="Time zone" hint="IANA name; waits and dates of protocols are local to the rig" error={errors.timeZone?.message} {...register("timeZone")} />
      <NumberField label="Ports" hint="Numbered inlets, 0 to 99" error={errors.ports?.message} {...register("ports", asNumber)} />
      <NumberField label="Waste container" hint="mL; leave empty if nobody measured it" error={errors.wasteCapacityMl?.message} {...register("wasteCapacityMl", asNumber)} />
      <OptionGroup legend="Clock" hint="It cannot change later: the times of all that the rig does depend on it.">
        <Option type="radio" value="real" {...register("clock")}>Real time</Option>
        <Option type="radio" value="simulated" note="for rehearsals" {...register("clock")}>Simulated, as its agent reports</Option>
      </OptionGroup>
      {errors.root && <p className="error font-medium" role="alert">{errors.root.message}</p>}
      <div className="buttons">
        <Button type="submit" look="primary" busy={make.isPending}>Make rig</Button>
        <LinkButton look="link" href="/rigs">Cancel</LinkButton>
      </div>
    </form>
  );
}
