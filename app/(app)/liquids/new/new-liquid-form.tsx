"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { FormProvider, useForm, useWatch } from "react-hook-form";
import type { z } from "zod";
import { asNumber, orNothing } from "@/components/ui/as-number";
import { Button, LinkButton } from "@/components/ui/button";
import { NumberField, SelectField, TextField } from "@/components/ui/field";
import { Section } from "@/components/ui/page";
import { showProblem } from "@/components/ui/show-problem";
import { fetchJson } from "@/lib/http/fetch-json";
import { LIQUID_MODELS, liquidBody, liquidCreated } from "@/lib/liquids/schema";
import { HazardFields } from "./hazard-fields";
import { TableFields } from "./table-fields";

export type LiquidValues = z.input<typeof liquidBody>;
type Liquid = z.output<typeof liquidBody>;

export function NewLiquidForm() {
  const router = useRouter();
  const queries = useQueryClient();
  const form = useForm<LiquidValues, unknown, Liquid>({
    resolver: zodResolver(liquidBody),
    defaultValues: { name: "", model: "water", hazards: { ghs: [], notWith: [] } },
    shouldUnregister: true,
  });
  const { register, handleSubmit, setError, control, formState } = form;
  const { errors } = formState;
  const model = useWatch({ control, name: "model" });
  const make = useMutation({
    mutationFn: (liquid: Liquid) => fetchJson("/api/liquids", { method: "POST", body: liquid, answer: liquidCreated }),
    onSuccess: async ({ id }) => {
      await queries.invalidateQueries({ queryKey: ["liquids"] });
      router.push(`/liquids/${id}`);
    },
    onError: (error) => showProblem(error, setError),
  });

  return (
    <FormProvider {...form}>
      <form onSubmit={(event) => void handleSubmit((liquid) => make.mutate(liquid))(event)} noValidate>
        <Section head="The liquid" note="Its letter stands in run strips; it is chosen from the name unless given.">
          <div className="grid max-w-[30em] gap-4">
            <TextField label="Name" error={errors.name?.message} {...register("name")} />
            <TextField label="Letter" hint="Capital letter, or two signs; may be left out" maxLength={2} error={errors.letter?.message} {...register("letter", orNothing)} />
          </div>
        </Section>
        <Section head="Properties" note="They stay: another model is another liquid.">
          <div className="grid max-w-[30em] gap-4">
            <SelectField label="Model" error={errors.model?.message} {...register("model")}>
              {LIQUID_MODELS.map((name) => <option key={name} value={name}>{name === "table" ? "own table" : name}</option>)}
            </SelectField>
            {isMixture(model) && (
              <NumberField label={`Mass fraction of ${model.replace("-water", "")}`} hint="0 to 1" error={errors.massFraction?.message} {...register("massFraction", asNumber)} />
            )}
          </div>
          {model === "table" && <TableFields />}
        </Section>
        <Section head="Hazards" note="From the supplier's sheet. Longreed asks for a named person's word where they matter.">
          <HazardFields />
          {errors.root && <p className="mt-4 font-medium" role="alert">{errors.root.message}</p>}
          <div className="buttons mt-5">
            <Button type="submit" look="primary" busy={make.isPending}>Record liquid</Button>
            <LinkButton look="link" href="/liquids">Cancel</LinkButton>
          </div>
        </Section>
      </form>
    </FormProvider>
  );
}

const isMixture = (model: string): boolean => model.endsWith("-water");
