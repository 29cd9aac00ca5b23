import { setTimeout as sleep } from "node:timers/promises";
import { row } from "@/lib/db";
import { startRig } from "@/rig-simulator/start-rig";
import type { Kept } from "./kept";
import type { Progress } from "./progress";
import type { DemoRig } from "./rigs";

const LOOK_EVERY_MS = 250;
/** A campaign that stands still for this long is not going to end. */
const PATIENCE_MS = 120_000;

export type Standing = { state: string; repeats: number; cycle: number; planned: number };

type RunCampaign = {
  name: string;
  campaignId: string;
  rig: DemoRig;
  kept: Kept;
  url: string;
  clockStart: Date;
  /** The rig's clock stops here and the campaign stays as it is. */
  until?: Date;
  isThere: (standing: Standing) => boolean | Promise<boolean>;
  /** What people do meanwhile. */
  meanwhile?: () => Promise<unknown>;
  progress: Progress;
};

/**
 * Lets a simulated rig measure as fast as it can, over HTTP like any agent, until the campaign is where the demo wants it. After an
 * interruption it goes on where the stored readings end.
 */
export async function runCampaign({ name, campaignId, rig, kept, url, clockStart, until, isThere, meanwhile, progress }: RunCampaign): Promise<void> {
  if (await isThere(await standingOf(campaignId))) return;
  const ending = new AbortController();
  const ended = new Error("the campaign is where it should be");
  const entry = { url, token: rig.token, scenario: rig.scenario, seed: rig.seed, speed: "fast", clockStart: clockStart.toISOString() };
  const running = startRig(entry, { signal: ending.signal, stateFolder: kept.simulatorFolder, until, log: () => undefined });
  const caughtUp = running.then(() => true);

  let last = "";
  let movedAt = performance.now();
  try {
    for (;;) {
      const over = await Promise.race([caughtUp, sleep(LOOK_EVERY_MS, false)]);
      const standing = await standingOf(campaignId);
      progress.tell(name, standing);
      if (over || (await isThere(standing))) return;
      await meanwhile?.();
      if (JSON.stringify(standing) !== last) movedAt = performance.now();
      last = JSON.stringify(standing);
      if (performance.now() - movedAt > PATIENCE_MS) throw new Error(`${name}: the campaign is ${standing.state} and has not moved for ${PATIENCE_MS / 1000} s`);
    }
  } finally {
    ending.abort(ended);
    await running.catch(() => undefined);
  }
}

async function standingOf(campaignId: string): Promise<Standing> {
  const found = await row<Standing>(
    `select c.state, coalesce((c.planned->>'repeats')::int, 0) as planned,
            coalesce(sum(s.stored) filter (where s.role <> 'find'), 0)::int as repeats, coalesce(max(s.cycle), 0) as cycle
       from campaign c left join step s on s.campaign_id = c.id and s.kind = 'measure' where c.id = $1 group by c.id`,
    [campaignId],
  );
  if (!found) throw new Error(`campaign ${campaignId} is gone`);
  return found;
}
