"use client";

import { useFieldArray, useFormContext } from "react-hook-form";
import { asNumber } from "@/components/ui/as-number";
import { Button } from "@/components/ui/button";
import { NumberField } from "@/components/ui/field";
import type { LiquidValues } from "./new-liquid-form";

const EMPTY = { temperatureC: undefined, densityKgM3: undefined, viscosityMPaS: undefined };

/** Rows of the liquid's own table, rising in temperature. */
export function TableFields() {
  const { register, control, formState } = useFormContext<LiquidValues>();
  const { fields, append, remove } = useFieldArray({ control, name: "table" });
  const { errors } = formState;
  const add = () => append(EMPTY as unknown as NonNullable<LiquidValues["table"]>[number]);
  return (
    <fieldset className="mt-4">
      <legend className="field-label">Table, rising in temperature</legend>
      {fields.map((field, row) => (
        <div key={field.id} className="mt-2 flex flex-wrap items-start gap-3">
          <NumberField className="w-28" label="Temperature" hint="°C" error={errors.table?.[row]?.temperatureC?.message} {...register(`table.${row}.temperatureC`, asNumber)} />
          <NumberField className="w-28" label="Density" hint="kg/m³" error={errors.table?.[row]?.densityKgM3?.message} {...register(`table.${row}.densityKgM3`, asNumber)} />
          <NumberField className="w-28" label="Viscosity" hint="mPa·s" error={errors.table?.[row]?.viscosityMPaS?.message} {...register(`table.${row}.viscosityMPaS`, asNumber)} />
          <Button small className="mt-6" onClick={() => remove(row)}>Remove</Button>
        </div>
      ))}
      {(errors.table?.message ?? errors.table?.root?.message) && <p className="small mt-2 font-medium" role="alert">It {errors.table?.message ?? errors.table?.root?.message}.</p>}
      <div className="buttons mt-3"><Button small onClick={add}>Add a temperature</Button></div>
    </fieldset>
  );
}
