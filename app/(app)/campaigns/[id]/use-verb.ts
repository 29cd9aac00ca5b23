"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { toast } from "sonner";
import { fetchJson } from "@/lib/http/fetch-json";

/** A verb of the campaign's page: calls, says what was done, and lets everything about campaigns and rigs be read again. */
export function useVerb({ path, done, onDone }: { path: string; done: string; onDone: () => void }) {
  const queries = useQueryClient();
  return useMutation({
    mutationFn: (body: Record<string, unknown>) => fetchJson(path, { method: "POST", body }),
    onSuccess: async () => {
      onDone();
      toast(done);
      await Promise.all([queries.invalidateQueries({ queryKey: ["campaigns"] }), queries.invalidateQueries({ queryKey: ["rigs"] })]);
    },
  });
}
