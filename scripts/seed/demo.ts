import { row } from "@/lib/db";
import { formatCount } from "@/lib/format";
import { type Anchor, anchorOf } from "./anchor";
import { closeTheBooks, lookAfter } from "./caretakers";
import { Kept } from "./kept";
import { begin, end, readMarker } from "./marker";
import { Progress } from "./progress";
import { runCampaign } from "./run-campaign";
import { type DemoLaboratory, setUp } from "./set-up";

type Say = (line: string) => void;
type SeedDemo = { password: string; dataFolder: string; url: string; say: Say };

/**
 * The demo laboratory, from an empty database to three rigs at work: set up through the use cases, measured by the simulator over HTTP.
 * Goes on after an interruption and returns at once when all is there.
 *
 * @throws when the database holds people or rigs that are not the demo's, or a campaign comes to a stand.
 */
export async function seedDemo({ password, dataFolder, url, say }: SeedDemo): Promise<void> {
  const begun = performance.now();
  const kept = new Kept(dataFolder);
  const marker = (await readMarker()) ?? (await begin(new Date()));
  if (marker.done) return kept.moveTo(url);

  const anchor = anchorOf(marker.begunAt);
  say("Setting up the demo laboratory: people, rigs, liquids, sensors, protocols");
  const laboratory = await setUp({ password, kept, anchor });
  say("Measuring six weeks on three rigs, as fast as they can (about a minute)");
  await measure(laboratory, { kept, url, anchor, say });
  await closeTheBooks({ team: laboratory.team, campaignId: laboratory.campaigns.north });
  await laboratory.queueTonight(new Date());

  const real = { url, speed: "real" };
  kept.writeRigs(Object.values(laboratory.rigs).map(({ token, scenario, seed }) => ({ ...real, token, scenario, seed })));
  await end(marker);
  const total = await row<{ repeats: number }>(`select count(*)::int as repeats from reading`);
  say(`The demo laboratory is complete: ${formatCount(total?.repeats ?? 0)} repeats in ${Math.round((performance.now() - begun) / 1000)} s`);
}

/** The first campaign to its end, the second to this moment, the third to where it asks for a person. */
async function measure({ team, rigs, campaigns }: DemoLaboratory, { kept, url, anchor, say }: { kept: Kept; url: string; anchor: Anchor; say: Say }): Promise<void> {
  const { clockStart } = anchor;
  const common = { kept, url, progress: new Progress(say) };
  await Promise.all([
    runCampaign({
      ...common,
      name: "North bench",
      campaignId: campaigns.north,
      rig: rigs.north,
      clockStart: clockStart.north,
      isThere: ({ state }) => state === "finished",
      meanwhile: () => lookAfter({ team, campaignId: campaigns.north }),
    }),
    runCampaign({
      ...common,
      name: "South bench",
      campaignId: campaigns.south,
      rig: rigs.south,
      clockStart: clockStart.south,
      until: new Date(),
      isThere: () => false,
    }),
    runCampaign({
      ...common,
      name: "Cold room",
      campaignId: campaigns.cold,
      rig: rigs.cold,
      clockStart: clockStart.cold,
      isThere: ({ state }) => state === "held",
    }),
  ]);
}
