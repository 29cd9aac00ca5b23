"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { FormProvider, useForm } from "react-hook-form";
import type { z } from "zod";
import { asDay } from "@/components/ui/as-number";
import { Button, LinkButton } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { showProblem } from "@/components/ui/show-problem";
import { fetchJson } from "@/lib/http/fetch-json";
import { lotBody } from "@/lib/liquids/schema";
import { created } from "@/lib/schema";
import { CertificateFields } from "../certificate-fields";

type Values = z.input<typeof lotBody>;
type Lot = z.output<typeof lotBody>;

export function NewLotForm({ liquidId }: { liquidId: string }) {
  const router = useRouter();
  const queries = useQueryClient();
  const form = useForm<Values, unknown, Lot>({ resolver: zodResolver(lotBody), defaultValues: { code: "", certificate: [] } });
  const { register, handleSubmit, setError, formState: { errors } } = form;
  const make = useMutation({
    mutationFn: (lot: Lot) => fetchJson(`/api/liquids/${liquidId}/lots`, { method: "POST", body: lot, answer: created }),
    onSuccess: async () => {
      await queries.invalidateQueries({ queryKey: ["liquids"] });
      router.push(`/liquids/${liquidId}`);
    },
    onError: (error) => showProblem(error, setError),
  });

  return (
    <FormProvider {...form}>
      <form onSubmit={(event) => void handleSubmit((lot) => make.mutate(lot))(event)} noValidate>
        <div className="grid max-w-[30em] gap-4">
          <TextField label="Code" hint="As on the bottle" error={errors.code?.message} {...register("code")} />
          <TextField type="date" label="Received" error={errors.receivedAt?.message} {...register("receivedAt", asDay("begins"))} />
          <TextField type="date" label="Expires" hint="Good to the end of that day" error={errors.expiresAt?.message} {...register("expiresAt", asDay("ends"))} />
        </div>
        <CertificateFields />
        {errors.root && <p className="mt-4 font-medium" role="alert">{errors.root.message}</p>}
        <div className="buttons mt-5">
          <Button type="submit" look="primary" busy={make.isPending}>Record lot</Button>
          <LinkButton look="link" href={`/liquids/${liquidId}`}>Cancel</LinkButton>
        </div>
      </form>
    </FormProvider>
  );
}
