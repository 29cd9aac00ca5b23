"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { FormProvider, useForm } from "react-hook-form";
import type { z } from "zod";
import { Button, LinkButton } from "@/components/ui/button";
import { Option, TextField } from "@/components/ui/field";
import { Section } from "@/components/ui/page";
import { showProblem } from "@/components/ui/show-problem";
import { fetchJson } from "@/lib/http/fetch-json";
import { liquidAnswer, liquidChange, type LiquidAnswer } from "@/lib/liquids/schema";
import { HazardFields } from "../../new/hazard-fields";

type Values = z.input<typeof liquidChange>;
type Change = z.output<typeof liquidChange>;

export function EditLiquidForm({ liquid }: { liquid: LiquidAnswer }) {
  const router = useRouter();
  const queries = useQueryClient();
  const { ghs, flashPointC, waste, notWith } = liquid.hazards;
  const form = useForm<Values, unknown, Change>({
    resolver: zodResolver(liquidChange),
    defaultValues: {
      name: liquid.name,
      letter: liquid.letter,
      hazards: { ghs, notWith, flashPointC: flashPointC ?? undefined, waste: waste ?? undefined },
      retired: liquid.retiredAt !== null,
    },
  });
  const { register, handleSubmit, setError, formState: { errors } } = form;
  const save = useMutation({
    mutationFn: (change: Change) => fetchJson(`/api/liquids/${liquid.id}`, { method: "PATCH", body: change, answer: liquidAnswer }),
    onSuccess: async () => {
      await queries.invalidateQueries({ queryKey: ["liquids"] });
      router.push(`/liquids/${liquid.id}`);
      router.refresh();
    },
    onError: (error) => showProblem(error, setError),
  });
  return (
    <FormProvider {...form}>
      <form onSubmit={(event) => void handleSubmit((change) => save.mutate(change))(event)} noValidate>
        <Section head="The liquid" note="Its property model stays: campaigns were analysed with it. Another model is another liquid.">
          <div className="grid max-w-[30em] gap-4">
            <TextField label="Name" error={errors.name?.message} {...register("name")} />
            <TextField label="Letter" hint="Capital letter, or two signs; it stands in run strips" maxLength={2} error={errors.letter?.message} {...register("letter")} />
            <Option type="checkbox" note="it gets no new lots; all that was measured in it stays" {...register("retired")}>Retired</Option>
          </div>
        </Section>
        <Section head="Hazards" note="From the supplier's sheet. Campaigns that are queued already keep the words that were acknowledged.">
          <HazardFields />
          {errors.root && <p className="mt-4 font-medium" role="alert">{errors.root.message}</p>}
          <div className="buttons mt-5">
            <Button type="submit" look="primary" busy={save.isPending}>Save</Button>
            <LinkButton look="link" href={`/liquids/${liquid.id}`}>Cancel</LinkButton>
          </div>
        </Section>
      </form>
    </FormProvider>
  );
}
