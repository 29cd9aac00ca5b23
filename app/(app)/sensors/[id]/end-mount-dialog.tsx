"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { ConfirmDialog } from "@/components/ui/dialog";
import { fetchJson } from "@/lib/http/fetch-json";
import { created } from "@/lib/schema";
import type { SensorAnswer } from "@/lib/sensors/schema";

export function EndMountDialog({ sensor, mountId, onClose }: { sensor: SensorAnswer; mountId: string; onClose: () => void }) {
  const queries = useQueryClient();
  const end = useMutation({
    mutationFn: () => fetchJson(`/api/mounts/${mountId}/end`, { method: "POST", body: {}, answer: created }),
    onSuccess: async () => {
      await Promise.all([queries.invalidateQueries({ queryKey: ["sensors"] }), queries.invalidateQueries({ queryKey: ["rigs"] })]);
      onClose();
    },
  });
  const where = sensor.mount?.rigName ?? "its rig";
  return (
    <ConfirmDialog
      open
      onOpenChange={(open) => !open && onClose()}
      title={`Take ${sensor.serial} out of ${where}?`}
      cost={sensor.campaign ? `${sensor.campaign.name} waits until it is mounted again, and then begins a new baseline.` : "Its next mount begins a new baseline."}
      keep="Leave it in"
      act="Take out"
      onAct={() => end.mutate()}
      busy={end.isPending}
    >
      {end.error && <p role="alert">{end.error.message}</p>}
    </ConfirmDialog>
  );
}
