"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useFieldArray, useForm } from "react-hook-form";
import type { z } from "zod";
import { asDay, asNumber } from "@/components/ui/as-number";
import { Button, LinkButton } from "@/components/ui/button";
import { NumberField, TextField } from "@/components/ui/field";
import { showProblem } from "@/components/ui/show-problem";
import { fetchJson } from "@/lib/http/fetch-json";
import { lotBody } from "@/lib/liquids/schema";
import { created } from "@/lib/schema";

type Values = z.input<typeof lotBody>;
type Lot = z.output<typeof lotBody>;
type Point = NonNullable<Values["certificate"]>[number];

const COLUMNS = [
  ["temperatureC", "Temperature", "°C"],
  ["densityKgM3", "Density", "kg/m³"],
  ["uDensityKgM3", "u of density", "kg/m³, k = 1"],
  ["viscosityMPaS", "Viscosity", "mPa·s"],
  ["uViscosityMPaS", "u of viscosity", "mPa·s, k = 1"],
] as const;

export function NewLotForm({ liquidId }: { liquidId: string }) {
  const router = useRouter();
  const queries = useQueryClient();
  const { register, control, handleSubmit, setError, formState } = useForm<Values, unknown, Lot>({ resolver: zodResolver(lotBody), defaultValues: { code: "", certificate: [] } });
  const { fields, append, remove } = useFieldArray({ control, name: "certificate" });
  const { errors } = formState;
  const make = useMutation({
    mutationFn: (lot: Lot) => fetchJson(`/api/liquids/${liquidId}/lots`, { method: "POST", body: lot, answer: created }),
    onSuccess: async () => {
      await queries.invalidateQueries({ queryKey: ["liquids"] });
      router.push(`/liquids/${liquidId}`);
    },
    onError: (error) => showProblem(error, setError),
  });

  return (
    <form onSubmit={(event) => void handleSubmit((lot) => make.mutate(lot))(event)} noValidate>
      <div className="grid max-w-[30em] gap-4">
        <TextField label="Code" hint="As on the bottle" error={errors.code?.message} {...register("code")} />
        <TextField type="date" label="Received" error={errors.receivedAt?.message} {...register("receivedAt", asDay("begins"))} />
        <TextField type="date" label="Expires" hint="Good to the end of that day" error={errors.expiresAt?.message} {...register("expiresAt", asDay("ends"))} />
      </div>
      <fieldset className="mt-4">
        <legend className="field-label">Certificate</legend>
        {fields.map((field, row) => (
          <div key={field.id} className="mt-2 flex flex-wrap items-start gap-3">
            {COLUMNS.map(([name, label, hint]) => (
              <NumberField key={name} className="w-28" label={label} hint={hint} error={errors.certificate?.[row]?.[name]?.message} {...register(`certificate.${row}.${name}`, asNumber)} />
            ))}
            <Button small className="mt-6" onClick={() => remove(row)}>Remove</Button>
          </div>
        ))}
        <div className="buttons mt-3"><Button small onClick={() => append({} as Point)}>Add a point</Button></div>
      </fieldset>
      {errors.root && <p className="mt-4 font-medium" role="alert">{errors.root.message}</p>}
      <div className="buttons mt-5">
        <Button type="submit" look="primary" busy={make.isPending}>Record lot</Button>
        <LinkButton look="link" href={`/liquids/${liquidId}`}>Cancel</LinkButton>
      </div>
    </form>
  );
}
