"use client";

import { useMutation } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { toast } from "sonner";
import { address } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import { fetchJson } from "@/lib/http/fetch-json";
import { sweepAnswer } from "@/lib/readings/schema";

/** Opens the repeat of a medium that was taken nearest to a time: where a plot of repeats was pressed. */
export function useOpenRepeat(campaignId: string, medium: string): (at: number) => void {
  const router = useRouter();
  const open = useMutation({
    mutationFn: (at: number) => fetchJson(address(`/api/campaigns/${campaignId}/sweep`, { medium, at: new Date(at).toISOString() }), { answer: sweepAnswer }),
    onSuccess: ({ sequence, index }) => router.push(`/campaigns/${campaignCode(campaignId)}/readings/${sequence}/${index}`),
    onError: (error) => toast(error.message),
  });
  return open.mutate;
}
