import type { CampaignAnswer } from "@/lib/campaigns/answers";

export type Possible = {
  pause: string | null;
  goOn: string | null;
  /** Each way to go on. */
  from: Record<"here" | "phase" | "cycle", string | null>;
  stop: string | null;
  setAside: string | null;
  takeOver: string | null;
  giveBack: boolean;
};

const WAITS: Partial<Record<CampaignAnswer["holds"][number]["reason"], string>> = {
  task: "a task is open; it goes on when the task is answered",
  takeOver: "a person works at the rig; it goes on when the rig is given back",
  silence: "the rig agent is silent; it goes on when the agent is heard again",
};

/** What can be done with a campaign now; the reason where it cannot. The server decides by the same rules. */
export function possible({ state, holds, parking, setAside, rig }: CampaignAnswer): Possible {
  const open = holds.filter(({ releasedAt }) => !releasedAt).map(({ reason }) => reason);
  const notBegun = state === "queued" ? "it has not begun" : null;
  const ended = state === "finished" || state === "stopped" || state === "failed" ? "it has ended" : null;
  const parked = parking === "wanted" || parking === "running" ? "the cell is being parked" : null;
  const waits = open.length > 0 && open.every((reason) => WAITS[reason]) ? (WAITS[open[0]] ?? null) : null;
  const aside = open.includes("setAside");
  const goOn = state !== "held" ? "nothing holds it" : (parked ?? waits);
  const here = aside ? "it was set aside; a new reference comes first" : parking === "parked" ? "the cell was parked" : null;
  return {
    pause: ended ?? notBegun ?? (open.includes("person") ? "a person has paused it already" : null),
    goOn,
    from: { here: goOn ?? here, phase: goOn, cycle: goOn },
    stop: ended,
    setAside: ended ?? notBegun ?? (aside ? "it has been set aside already" : null),
    takeOver: ended ?? notBegun ?? (setAside ? `it is not on ${rig}` : null),
    giveBack: open.includes("takeOver"),
  };
}
