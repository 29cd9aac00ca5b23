"use client";

import { useFormContext } from "react-hook-form";
import type { z } from "zod";
import { asNumber, orNothing } from "@/components/ui/as-number";
import { NumberField, Option, TextField } from "@/components/ui/field";
import { GHS_CODES, hazardStatement } from "@/lib/liquids/ghs";
import type { liquidChange } from "@/lib/liquids/schema";

/** Separated by commas or semicolons, as a list. */
const asList = {
  setValueAs: (typed: unknown): unknown => (typeof typed === "string" ? typed.split(/[,;]/).map((part) => part.trim()).filter(Boolean) : typed),
};

/** Hazards of a liquid, inside the form that makes or changes it. */
export function HazardFields() {
  const { register, formState } = useFormContext<Pick<z.input<typeof liquidChange>, "hazards">>();
  const errors = formState.errors.hazards;
  return (
    <div className="grid gap-4">
      <div className="grid max-w-[30em] gap-4">
        <NumberField label="Flash point" hint="°C, closed cup; leave empty where there is none" error={errors?.flashPointC?.message} {...register("hazards.flashPointC", asNumber)} />
        <TextField label="Compatible waste" hint="Solvents, halogen-free" error={errors?.waste?.message} {...register("hazards.waste", orNothing)} />
        <TextField label="Not to be mixed with" hint="Names of liquids or substances, with commas" error={errors?.notWith?.message} {...register("hazards.notWith", asList)} />
      </div>
      <fieldset>
        <legend className="field-label mb-1">Hazard statements on the label (GHS)</legend>
        <div className="grid gap-x-8 grid-cols-[repeat(auto-fill,minmax(300px,1fr))]">
          {GHS_CODES.map((code) => (
            <Option key={code} type="checkbox" value={code} {...register("hazards.ghs")}>
              <b>{code}</b> {hazardStatement(code)?.text}
            </Option>
          ))}
        </div>
      </fieldset>
    </div>
  );
}
