import { formatCount } from "@/lib/format";
import { change, row } from "@/lib/db";
import type { RigEntry } from "@/rig-simulator/start-rig";
import { anchorOf, before, ZONE } from "./anchor";
import { ensureQueued } from "./campaigns";
import { closeTheBooks, lookAfter } from "./caretakers";
import { Kept } from "./kept";
import { seedLiquids } from "./liquids";
import { begin, end, readMarker } from "./marker";
import { seedPeople } from "./people";
import { Progress } from "./progress";
import { seedProtocols } from "./protocols";
import { type DemoRig, seedRigs } from "./rigs";
import { runCampaign } from "./run-campaign";
import { seedSensors } from "./sensors";

type SeedDemo = { password: string; dataFolder: string; url: string; say: (line: string) => void };

const LABORATORY = { name: "Harrowmere sensor laboratory", timeZone: ZONE };

/**
 * The demo laboratory, from an empty database to three rigs at work: set up through the use cases, measured by the simulator over HTTP.
 * Goes on after an interruption and returns at once when all is there.
 *
 * @throws when the database holds people or rigs that are not the demo's, or a campaign comes to a stand.
 */
export async function seedDemo({ password, dataFolder, url, say }: SeedDemo): Promise<void> {
  const begun = performance.now();
  const marker = (await readMarker()) ?? (await begin(new Date()));
  const kept = new Kept(dataFolder);
  if (marker.done) return kept.writeRigs(kept.rigs().map((entry) => ({ ...entry, url })));

  const anchor = anchorOf(marker.begunAt);
  const now = anchor.setUpAt;
  say("Setting up the demo laboratory: people, rigs, liquids, sensors, protocols");
  const team = await seedPeople({ password, now });
  await change(`insert into setting (name, value) values ('laboratory', $1) on conflict do nothing`, [JSON.stringify(LABORATORY)]);
  const lots = await seedLiquids({ by: team.researcher, now });
  const rigs = await seedRigs({ team, lots, kept, now });
  const sensors = await seedSensors({ team, rigs, now });
  const protocols = await seedProtocols({ by: team.researcher, now });

  const by = team.researcher;
  const { clockStart } = anchor;
  const onNorth = { by, sensorId: sensors["WR-2207"], rigId: rigs.north.id };
  const bound = { water: { port: 1, lotId: lots["WA-0512"] }, propanol: { port: 2, lotId: lots["IP-0447"] }, calder: { port: 3, lotId: lots["CA-12-0388"] } };
  const sixWeeks = await ensureQueued({
    ...onNorth,
    now: before(clockStart.north, 40),
    name: "Wire, six weeks of two liquids a day",
    protocolVersionId: protocols.threeLiquids,
    slots: { Water: bound.water, "2-Propanol": bound.propanol, "Calder 12": bound.calder },
  });
  const brine = await ensureQueued({
    by,
    now: before(clockStart.south, 25),
    name: "Tube, brine against water",
    protocolVersionId: protocols.brine,
    sensorId: sensors["TB-3041"],
    rigId: rigs.south.id,
    slots: {
      Water: { port: 1, lotId: lots["WA-0512"] },
      "Brine B-35": { port: 2, lotId: lots["B35-0102"] },
      "2-Propanol": { port: 3, lotId: lots["IP-0447"] },
    },
  });
  const fork = await ensureQueued({
    by,
    now: before(clockStart.cold, 30),
    name: "Fork at 5 °C in Tarn mix 3",
    protocolVersionId: protocols.cold,
    sensorId: sensors["FK-0914"],
    rigId: rigs.cold.id,
    slots: { "Tarn mix 3": { port: 1, lotId: lots["T3-0077"] }, "2-Propanol": { port: 2, lotId: lots["IP-0447"] } },
  });

  say("Measuring six weeks on three rigs, as fast as they can (about a minute)");
  const common = { kept, url, progress: new Progress(say) };
  await Promise.all([
    runCampaign({
      ...common,
      name: "North bench",
      campaignId: sixWeeks,
      rig: rigs.north,
      clockStart: clockStart.north,
      isThere: ({ state }) => state === "finished",
      meanwhile: () => lookAfter({ team, campaignId: sixWeeks }),
    }),
    runCampaign({
      ...common,
      name: "South bench",
      campaignId: brine,
      rig: rigs.south,
      clockStart: clockStart.south,
      until: new Date(),
      isThere: () => false,
    }),
    runCampaign({
      ...common,
      name: "Cold room",
      campaignId: fork,
      rig: rigs.cold,
      clockStart: clockStart.cold,
      isThere: ({ state }) => state === "held",
    }),
  ]);
  await closeTheBooks({ team, campaignId: sixWeeks });
  await ensureQueued({
    ...onNorth,
    now: new Date(),
    name: "Wire, temperature staircase in water",
    protocolVersionId: protocols.staircase,
    slots: { Water: bound.water },
    startAt: anchor.tonight,
  });

  kept.writeRigs(Object.values(rigs).map((rig) => entryOf(rig, url)));
  await end(marker);
  const total = await row<{ repeats: number }>(`select count(*)::int as repeats from reading`);
  say(`The demo laboratory is complete: ${formatCount(total?.repeats ?? 0)} repeats in ${Math.round((performance.now() - begun) / 1000)} s`);
}

/** From now on the rigs run in real time. */
const entryOf = ({ token, scenario, seed }: DemoRig, url: string): RigEntry => ({ url, token, scenario, seed, speed: "real" });
