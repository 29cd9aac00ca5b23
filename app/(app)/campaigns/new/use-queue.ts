"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useRef } from "react";
import { campaignCode } from "@/lib/campaigns/code";
import { queueDraft, saveDraft } from "@/lib/campaigns/draft-client";
import type { CampaignInput } from "@/lib/campaigns/draft-schema";

type ToQueue = { draft: CampaignInput; acknowledgements: readonly string[] };

/** Saves the draft once and queues it. When queueing is refused, the next try changes the same draft; so does going on with one that was left. */
export function useQueue(keptId?: string) {
  const router = useRouter();
  const queries = useQueryClient();
  const draftId = useRef<string | undefined>(keptId);
  const save = async (draft: CampaignInput) => {
    const { id } = await saveDraft(draft, draftId.current);
    draftId.current = id;
    return id;
  };
  const arrive = async (path: string) => {
    await queries.invalidateQueries({ queryKey: ["campaigns"] });
    router.push(path);
  };
  const queueing = useMutation({
    mutationFn: async ({ draft, acknowledgements }: ToQueue) => queueDraft(await save(draft), acknowledgements),
    onSuccess: ({ id }) => arrive(`/campaigns/${campaignCode(id)}`),
    onError: () => queries.invalidateQueries({ queryKey: ["campaigns", "check"] }),
  });
  const keeping = useMutation({ mutationFn: save, onSuccess: () => arrive("/campaigns") });
  return {
    queue: (given: ToQueue) => queueing.mutate(given),
    keep: (draft: CampaignInput) => keeping.mutate(draft),
    isQueueing: queueing.isPending,
    isSaving: keeping.isPending,
    error: queueing.error ?? keeping.error,
  };
}
