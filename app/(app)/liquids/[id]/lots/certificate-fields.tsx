"use client";

import { useFieldArray, useFormContext } from "react-hook-form";
import type { z } from "zod";
import { asNumber } from "@/components/ui/as-number";
import { Button } from "@/components/ui/button";
import { NumberField } from "@/components/ui/field";
import type { lotChange } from "@/lib/liquids/schema";

type Values = Pick<z.input<typeof lotChange>, "certificate">;
type Point = NonNullable<Values["certificate"]>[number];

const COLUMNS = [
  ["temperatureC", "Temperature", "°C"],
  ["densityKgM3", "Density", "kg/m³"],
  ["uDensityKgM3", "u of density", "kg/m³, k = 1"],
  ["viscosityMPaS", "Viscosity", "mPa·s"],
  ["uViscosityMPaS", "u of viscosity", "mPa·s, k = 1"],
] as const;

/** Points of a lot's certificate, inside the form of the lot. */
export function CertificateFields() {
  const { register, control, formState: { errors } } = useFormContext<Values>();
  const { fields, append, remove } = useFieldArray({ control, name: "certificate" });
  return (
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
  );
}
