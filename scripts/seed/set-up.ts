import { changeLaboratory } from "@/lib/laboratory-settings/change";
import { type Anchor, before, ZONE } from "./anchor";
import { ensureQueued } from "./campaigns";
import type { Kept } from "./kept";
import { seedLiquids } from "./liquids";
import { seedPeople, type Team } from "./people";
import { seedProtocols } from "./protocols";
import { type Bench, type DemoRig, seedRigs } from "./rigs";
import { seedSensors } from "./sensors";

export type DemoLaboratory = {
  team: Team;
  rigs: Record<Bench, DemoRig>;
  /** Queued, one on each rig. */
  campaigns: Record<Bench, string>;
  /** Puts one more in line where the first has ended. */
  queueTonight: (now: Date) => Promise<string>;
};

const LABORATORY = { name: "Harrowmere sensor laboratory", timeZone: ZONE };

/** Everything that people set up before anything is measured, through the same use cases as theirs. What is there is left as it is. */
export async function setUp({ password, kept, anchor }: { password: string; kept: Kept; anchor: Anchor }): Promise<DemoLaboratory> {
  const { setUpAt: now, clockStart, tonight } = anchor;
  const team = await seedPeople({ password, now });
  const by = team.researcher;
  await changeLaboratory({ ...LABORATORY, by: team.administrator, now });
  const lots = await seedLiquids({ by, now });
  const rigs = await seedRigs({ team, lots, kept, now });
  const sensors = await seedSensors({ team, rigs, now });
  const protocols = await seedProtocols({ by, now });

  const bottle = (port: number, code: string) => ({ port, lotId: lots[code] });
  const wire = { by, sensorId: sensors["WR-2207"], rigId: rigs.north.id };
  const campaigns = {
    north: await ensureQueued({
      ...wire,
      now: before(clockStart.north, 40),
      name: "Wire, six weeks of two liquids a day",
      protocolVersionId: protocols.twoLiquids,
      slots: { Water: bottle(1, "WA-0512"), "2-Propanol": bottle(2, "IP-0447"), "Calder 12": bottle(3, "CA-12-0388") },
    }),
    south: await ensureQueued({
      by,
      now: before(clockStart.south, 25),
      name: "Tube, brine against water",
      protocolVersionId: protocols.brine,
      sensorId: sensors["TB-3041"],
      rigId: rigs.south.id,
      slots: { Water: bottle(1, "WA-0512"), "Brine B-35": bottle(2, "B35-0102"), "2-Propanol": bottle(3, "IP-0447") },
    }),
    cold: await ensureQueued({
      by,
      now: before(clockStart.cold, 30),
      name: "Fork at 5 °C in Tarn mix 3",
      protocolVersionId: protocols.cold,
      sensorId: sensors["FK-0914"],
      rigId: rigs.cold.id,
      slots: { "Tarn mix 3": bottle(1, "T3-0077"), "2-Propanol": bottle(2, "IP-0447") },
    }),
  };
  const queueTonight = (at: Date) =>
    ensureQueued({
      ...wire,
      now: at,
      name: "Wire, temperature staircase in water",
      protocolVersionId: protocols.staircase,
      slots: { Water: bottle(1, "WA-0512") },
      startAt: tonight,
    });
  return { team, rigs, campaigns, queueTonight };
}
