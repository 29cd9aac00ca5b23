"use client";

import { useState, type ReactNode } from "react";
import { ConfirmDialog } from "@/components/ui/dialog";
import { TextField } from "@/components/ui/field";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount, plural } from "@/lib/format";
import { useVerb } from "./use-verb";

type VerbDialogProps = { campaign: CampaignAnswer; onClose: () => void };

const NO_EMERGENCY_STOP = "Pause and Stop in a browser are not an emergency stop.";

export function PauseDialog({ campaign, onClose }: VerbDialogProps) {
  return (
    <Ask
      onClose={onClose}
      title={`Pause ${campaignCode(campaign.id)}?`}
      cost={<>It pauses after the present repeat and keeps the cell as it is; the rig idles until somebody lets it go on. {NO_EMERGENCY_STOP}</>}
      keep="Keep measuring"
      act="Pause"
      path={`/api/campaigns/${campaign.id}/hold`}
      done={`${campaignCode(campaign.id)} pauses after the present repeat.`}
    />
  );
}

export function StopDialog({ campaign, onClose }: VerbDialogProps) {
  return (
    <Ask
      onClose={onClose}
      title={`Stop ${campaignCode(campaign.id)} for good?`}
      cost={<>{unmeasured(campaign)} What was measured stays. The cell is made safe by the protocol’s park steps, then the rig is free for the next in line. {NO_EMERGENCY_STOP}</>}
      keep="Keep it"
      act="Stop"
      whyNeeded
      path={`/api/campaigns/${campaign.id}/stop`}
      done={`${campaignCode(campaign.id)} was stopped.`}
    />
  );
}

export function SetAsideDialog({ campaign, onClose }: VerbDialogProps) {
  return (
    <Ask
      onClose={onClose}
      title={`Set ${campaignCode(campaign.id)} aside?`}
      cost="The cell is parked and the rig is free for the next in line. It comes back from its phase or its cycle, with a new air reference first."
      keep="Keep it on the rig"
      act="Set aside"
      whyNeeded
      path={`/api/campaigns/${campaign.id}/set-aside`}
      done={`${campaignCode(campaign.id)} is being set aside.`}
    />
  );
}

export function TakeOverDialog({ campaign, onClose }: VerbDialogProps) {
  return (
    <Ask
      onClose={onClose}
      title={`Take over ${campaign.rig}?`}
      cost={<>{campaignCode(campaign.id)} waits after the present repeat, and no step goes out until you give the rig back.</>}
      keep="Let it run"
      act="Take over"
      path={`/api/rigs/${campaign.rigId}/take-over`}
      done={`You have taken over ${campaign.rig}.`}
    />
  );
}

/** `712 repeats would not be measured.` */
export function unmeasured({ progress: { repeats, repeatsPlanned } }: Pick<CampaignAnswer, "progress">): string {
  const left = repeatsPlanned === null ? 0 : Math.max(0, repeatsPlanned - repeats);
  return left > 0 ? `${formatCount(left)} ${plural(left, "repeat")} would not be measured.` : "";
}

type AskProps = { title: string; cost: ReactNode; keep: string; act: string; whyNeeded?: boolean; path: string; done: string; onClose: () => void };

function Ask({ title, cost, keep, act, whyNeeded, path, done, onClose }: AskProps) {
  const [why, setWhy] = useState("");
  const verb = useVerb({ path, done, onDone: onClose });
  const given = why.trim();
  return (
    <ConfirmDialog
      open
      onOpenChange={(open) => !open && onClose()}
      title={title}
      cost={cost}
      keep={keep}
      act={act}
      busy={verb.isPending}
      notPossible={whyNeeded && !given ? "say why first" : null}
      onAct={() => verb.mutate(given ? { why: given } : {})}
    >
      <TextField label="Why" hint={whyNeeded ? "It goes into the log" : "May be left out; it goes into the log"} maxLength={2000} value={why} onChange={(event) => setWhy(event.target.value)} error={verb.error?.message} />
    </ConfirmDialog>
  );
}
