import { row } from "@/lib/db";
import { recordLoad } from "@/lib/rigs/record-load";
import { createRig } from "@/lib/rigs/create";
import { createAgentToken, revokeAgentToken } from "@/lib/rigs/tokens";
import { loadScenario } from "@/rig-simulator/load-scenario";
import { ZONE } from "./anchor";
import type { Kept } from "./kept";
import type { Lots } from "./liquids";
import type { Team } from "./people";

export type Bench = "north" | "south" | "cold";

/** What stands on the ports; the simulator pumps from the same volumes. */
const benches: Record<Bench, { scenario: string; seed: number; lots: string[] }> = {
  north: { scenario: "north-bench", seed: 8, lots: ["WA-0512", "IP-0447", "CA-12-0388"] },
  south: { scenario: "south-bench", seed: 3, lots: ["WA-0512", "B35-0102", "IP-0447"] },
  cold: { scenario: "cold-room", seed: 5, lots: ["T3-0077", "IP-0447", "WA-0512"] },
};

export type DemoRig = { id: string; token: string; scenario: string; seed: number };

type SeedRigs = { team: Team; lots: Lots; kept: Kept; now: Date };

/** The rigs with their bottles, each with a token for its simulated agent. Simulated clocks: their past is measured in minutes. */
export async function seedRigs({ team, lots, kept, now }: SeedRigs): Promise<Record<Bench, DemoRig>> {
  const rigs: Partial<Record<Bench, DemoRig>> = {};
  for (const [bench, given] of Object.entries(benches) as [Bench, (typeof benches)[Bench]][]) {
    const { scenario, seed } = given;
    const { rig } = loadScenario(scenario);
    const found = await row<{ id: string }>(`select id from rig where name = $1`, [rig.name]);
    const id =
      found?.id ??
      (
        await createRig({
          by: team.administrator,
          now,
          name: rig.name,
          timeZone: ZONE,
          ports: rig.ports.length,
          clock: "simulated",
          wasteCapacityMl: rig.wasteCapacityMl,
        })
      ).id;
    for (const [index, { port, volumeMl }] of rig.ports.entries()) {
      const loaded = await row(`select id from load where rig_id = $1 and port = $2`, [id, port]);
      if (!loaded) await recordLoad({ by: team.operator, now, rigId: id, port, lotId: lots[given.lots[index]], volumeMl, how: "replace" });
    }
    rigs[bench] = { id, token: await tokenOf(id, { team, kept, now }), scenario, seed };
  }
  return rigs as Record<Bench, DemoRig>;
}

/** A token is shown once, so that the data folder keeps it; where that was lost, a new one takes its place. */
async function tokenOf(rigId: string, { team, kept, now }: Omit<SeedRigs, "lots">): Promise<string> {
  const by = team.administrator;
  const standing = await row<{ id: string }>(`select id from agent_token where rig_id = $1 and revoked_at is null order by id desc limit 1`, [rigId]);
  const known = kept.token(rigId);
  if (standing && known?.tokenId === standing.id) return known.token;
  if (standing) await revokeAgentToken({ by, now, rigId, tokenId: standing.id });
  const { id: tokenId, token } = await createAgentToken({ by, now, rigId, name: "Simulator" });
  kept.keepToken(rigId, { tokenId, token });
  return token;
}
