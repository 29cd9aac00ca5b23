"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { FormProvider, useForm, type Resolver } from "react-hook-form";
import type { z } from "zod";
import { asDay } from "@/components/ui/as-number";
import { Button, LinkButton } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { showProblem } from "@/components/ui/show-problem";
import { fetchJson } from "@/lib/http/fetch-json";
import { lotAnswer, lotChange, type LotAnswer } from "@/lib/liquids/schema";
import { CertificateFields } from "../../certificate-fields";

type Values = z.input<typeof lotChange>;
type Change = z.output<typeof lotChange>;

const check = zodResolver<Values, unknown, Change>(lotChange);
const began = asDay("begins");
const ends = asDay("ends");

/** Date fields hold days, the call takes times; an empty one takes the date away. */
const resolver: Resolver<Values, unknown, Change> = (values, context, options) =>
  check({ ...values, receivedAt: (began.setValueAs(values.receivedAt) ?? null) as string | null, expiresAt: (ends.setValueAs(values.expiresAt) ?? null) as string | null }, context, options);

export function EditLotForm({ lot }: { lot: LotAnswer }) {
  const router = useRouter();
  const queries = useQueryClient();
  const form = useForm<Values, unknown, Change>({
    resolver,
    defaultValues: { receivedAt: lot.receivedAt?.slice(0, 10) ?? "", expiresAt: lot.expiresAt?.slice(0, 10) ?? "", certificate: lot.certificate },
  });
  const { register, handleSubmit, setError, formState: { errors } } = form;
  const save = useMutation({
    mutationFn: (change: Change) => fetchJson(`/api/lots/${lot.id}`, { method: "PATCH", body: change, answer: lotAnswer }),
    onSuccess: async () => {
      await queries.invalidateQueries({ queryKey: ["liquids"] });
      router.push(`/liquids/${lot.liquidId}`);
      router.refresh();
    },
    onError: (error) => showProblem(error, setError),
  });
  return (
    <FormProvider {...form}>
      <form onSubmit={(event) => void handleSubmit((change) => save.mutate(change))(event)} noValidate>
        <div className="grid max-w-[30em] gap-4">
          <TextField type="date" label="Received" error={errors.receivedAt?.message} {...register("receivedAt")} />
          <TextField type="date" label="Expires" hint="Good to the end of that day" error={errors.expiresAt?.message} {...register("expiresAt")} />
        </div>
        <CertificateFields />
        {errors.root && <p className="mt-4 font-medium" role="alert">{errors.root.message}</p>}
        <div className="buttons mt-5">
          <Button type="submit" look="primary" busy={save.isPending}>Save</Button>
          <LinkButton look="link" href={`/liquids/${lot.liquidId}`}>Cancel</LinkButton>
        </div>
      </form>
    </FormProvider>
  );
}
