"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import { asNumber, orNothing, orNull } from "@/components/ui/as-number";
import { Button, LinkButton } from "@/components/ui/button";
import { NumberField, Option, OptionGroup, TextAreaField } from "@/components/ui/field";
import { F0, Q } from "@/components/ui/quantity";
import { showProblem } from "@/components/ui/show-problem";
import { fetchJson } from "@/lib/http/fetch-json";
import { sensorAnswer, sensorChange, type SensorAnswer } from "@/lib/sensors/schema";

type Values = z.input<typeof sensorChange>;
type Change = z.output<typeof sensorChange>;

export function EditSensorForm({ sensor }: { sensor: SensorAnswer }) {
  const router = useRouter();
  const queries = useQueryClient();
  const { readout, nominalF0Hz, nominalQ, radiusM, note, retiredAt } = sensor;
  const { register, handleSubmit, setError, formState: { errors } } = useForm<Values, unknown, Change>({
    resolver: zodResolver(sensorChange),
    defaultValues: { readout, nominalF0Hz, nominalQ, radiusM, note, retired: retiredAt !== null },
  });
  const save = useMutation({
    mutationFn: (change: Change) => fetchJson(`/api/sensors/${sensor.id}`, { method: "PATCH", body: change, answer: sensorAnswer }),
    onSuccess: async () => {
      await queries.invalidateQueries({ queryKey: ["sensors"] });
      router.push(`/sensors/${sensor.id}`);
      router.refresh();
    },
    onError: (error) => showProblem(error, setError),
  });
  return (
    <form className="grid max-w-[30em] gap-4" onSubmit={(event) => void handleSubmit((change) => save.mutate(change))(event)} noValidate>
      <OptionGroup legend="Readout">
        <Option type="radio" value="velocity" {...register("readout")}>Velocity</Option>
        <Option type="radio" value="displacement" {...register("readout")}>Displacement</Option>
      </OptionGroup>
      <NumberField label={<>Nominal <F0 /> in air</>} hint="Hz" error={errors.nominalF0Hz?.message} {...register("nominalF0Hz", asNumber)} />
      <NumberField label={<>Nominal <Q /> in air</>} error={errors.nominalQ?.message} {...register("nominalQ", asNumber)} />
      <NumberField label="Radius" hint="m, of a wire; may be left out" error={errors.radiusM?.message} {...register("radiusM", orNull(asNumber))} />
      <TextAreaField label="Note" error={errors.note?.message} {...register("note", orNull(orNothing))} />
      <Option type="checkbox" note="all that was measured with it stays" {...register("retired")}>Retired</Option>
      {errors.root && <p className="font-medium" role="alert">{errors.root.message}</p>}
      <div className="buttons">
        <Button type="submit" look="primary" busy={save.isPending}>Save</Button>
        <LinkButton look="link" href={`/sensors/${sensor.id}`}>Cancel</LinkButton>
      </div>
    </form>
  );
}
