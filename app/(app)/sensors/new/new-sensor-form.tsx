"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import { asNumber, orNothing } from "@/components/ui/as-number";
import { Button, LinkButton } from "@/components/ui/button";
import { NumberField, Option, OptionGroup, SelectField, TextAreaField, TextField } from "@/components/ui/field";
import { F0, Q } from "@/components/ui/quantity";
import { showProblem } from "@/components/ui/show-problem";
import { fetchJson } from "@/lib/http/fetch-json";
import { created } from "@/lib/schema";
import { sensorBody } from "@/lib/sensors/schema";

type Values = z.input<typeof sensorBody>;
type Sensor = z.output<typeof sensorBody>;

export function NewSensorForm() {
  const router = useRouter();
  const queries = useQueryClient();
  const { register, handleSubmit, setError, formState } = useForm<Values, unknown, Sensor>({
    resolver: zodResolver(sensorBody),
    defaultValues: { serial: "", kind: "wire", readout: "velocity" },
  });
  const { errors } = formState;
  const make = useMutation({
    mutationFn: (sensor: Sensor) => fetchJson("/api/sensors", { method: "POST", body: sensor, answer: created }),
    onSuccess: async ({ id }) => {
      await queries.invalidateQueries({ queryKey: ["sensors"] });
      router.push(`/sensors/${id}`);
    },
    onError: (error) => showProblem(error, setError),
  });

  return (
    <form className="grid max-w-[30em] gap-4" onSubmit={(event) => void handleSubmit((sensor) => make.mutate(sensor))(event)} noValidate>
      <TextField label="Serial number" error={errors.serial?.message} {...register("serial")} />
      <SelectField label="Kind" error={errors.kind?.message} {...register("kind")}>
        <option value="wire">Vibrating wire</option>
        <option value="tube">Vibrating tube</option>
        <option value="fork">Tuning fork</option>
        <option value="plate">Plate</option>
      </SelectField>
      <OptionGroup legend="Readout">
        <Option type="radio" value="velocity" {...register("readout")}>Velocity</Option>
        <Option type="radio" value="displacement" {...register("readout")}>Displacement</Option>
      </OptionGroup>
      <NumberField label={<>Nominal <F0 /> in air</>} hint="Hz" error={errors.nominalF0Hz?.message} {...register("nominalF0Hz", asNumber)} />
      <NumberField label={<>Nominal <Q /> in air</>} error={errors.nominalQ?.message} {...register("nominalQ", asNumber)} />
      <NumberField label="Radius" hint="m, of a wire; may be left out" error={errors.radiusM?.message} {...register("radiusM", asNumber)} />
      <TextAreaField label="Note" error={errors.note?.message} {...register("note", orNothing)} />
      {errors.root && <p className="font-medium" role="alert">{errors.root.message}</p>}
      <div className="buttons">
        <Button type="submit" look="primary" busy={make.isPending}>Record sensor</Button>
        <LinkButton look="link" href="/sensors">Cancel</LinkButton>
      </div>
    </form>
  );
}
