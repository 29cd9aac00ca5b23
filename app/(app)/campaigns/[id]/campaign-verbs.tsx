"use client";

import { useState } from "react";
import { Button, LinkButton } from "@/components/ui/button";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { address } from "@/lib/campaigns/client";
import { campaignCode } from "@/lib/campaigns/code";
import { may, type Role } from "@/lib/permissions";
import { ExportDialog } from "./export-dialog";
import { GoOnDialog } from "./go-on-dialog";
import { PauseDialog, SetAsideDialog, StopDialog, TakeOverDialog } from "./verb-dialogs";
import { possible } from "./possible";
import { useVerb } from "./use-verb";

type Asking = "pause" | "goOn" | "stop" | "setAside" | "takeOver" | "export";

/** The verbs of a campaign, for those who may. One that is not possible now stays, dashed, with the reason. */
export function CampaignVerbs({ campaign, role }: { campaign: CampaignAnswer; role: Role }) {
  const [asking, setAsking] = useState<Asking>();
  const close = () => setAsking(undefined);
  const can = possible(campaign);
  const giveBack = useVerb({ path: `/api/rigs/${campaign.rigId}/give-back`, done: `${campaign.rig} was given back.`, onDone: close });
  const { id, state, protocolVersionId: version, sensorId: sensor, rigId: rig } = campaign;
  const again = address("/campaigns/new", { version: version ?? undefined, sensor: sensor ?? undefined, rig: rig ?? undefined });
  const dialog = { campaign, onClose: close };
  const heldOrRuns = state === "running" || state === "held";

  return (
    <>
      {state === "draft" && may(role, "edit campaigns") && <LinkButton look="primary" href={`/campaigns/new?draft=${campaignCode(id)}`}>Queue</LinkButton>}
      {state === "held"
        ? may(role, "resume campaigns") && <Button look="primary" notPossible={can.goOn} onClick={() => setAsking("goOn")}>Go on</Button>
        : (heldOrRuns || state === "queued") && may(role, "hold campaigns") && <Button look="primary" notPossible={can.pause} onClick={() => setAsking("pause")}>Pause</Button>}
      {(heldOrRuns || state === "queued") && (
        <>
          {may(role, "stop campaigns") && <Button notPossible={can.stop} onClick={() => setAsking("stop")}>Stop</Button>}
          {may(role, "set campaigns aside") && <Button look="link" notPossible={can.setAside} onClick={() => setAsking("setAside")}>Set aside</Button>}
          {may(role, "take over rigs") &&
            (can.giveBack ? (
              <Button look="link" busy={giveBack.isPending} onClick={() => giveBack.mutate({})}>Give back</Button>
            ) : (
              <Button look="link" notPossible={can.takeOver} onClick={() => setAsking("takeOver")}>Take over</Button>
            ))}
        </>
      )}
      {campaign.endedAt && campaign.origin === "protocol" && may(role, "edit campaigns") && <LinkButton href={again}>Run again</LinkButton>}
      {campaign.progress.repeats > 0 && <Button look="link" onClick={() => setAsking("export")}>Export</Button>}
      {giveBack.error && <p role="alert" className="small w-full">{giveBack.error.message}</p>}

      {asking === "pause" && <PauseDialog {...dialog} />}
      {asking === "goOn" && <GoOnDialog {...dialog} />}
      {asking === "stop" && <StopDialog {...dialog} />}
      {asking === "setAside" && <SetAsideDialog {...dialog} />}
      {asking === "export" && <ExportDialog {...dialog} />}
      {asking === "takeOver" && <TakeOverDialog {...dialog} />}
    </>
  );
}
