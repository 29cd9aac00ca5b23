import type { Checked } from "@/lib/campaigns/check";
import type { CheckAnswer } from "@/lib/campaigns/draft-schema";
import { peopleNeeded } from "@/lib/campaigns/people-needed";
import type { SlotLiquid } from "@/lib/campaigns/slot-liquids";
import { rows } from "@/lib/db";
import { typicalViscosityMPaS } from "@/lib/liquids/property-model";
import { tintOf } from "@/lib/liquids/tint";
import { forecast } from "@/lib/protocol/forecast";
import { start } from "@/lib/protocol/interpreter";
import { readTimeline } from "@/lib/rigs/timeline";
import type { PropertyRow } from "@/models/json";

type InLine = { checked: Checked; rigId: string; startAt?: Date | null; priority: number; now: Date };

/** So far ahead is looked for what needs a person. */
const MOST_STEPS = 2000;

/** The rig's next weeks with a campaign in them that is being put together, and when it would need a person; null when it lies beyond all that is known. */
export async function forecastInLine({ checked: { chosen, bound, plan }, rigId, startAt, priority, now }: InLine): Promise<CheckAnswer["forecast"]> {
  const { definition, sensor, rig } = chosen;
  const liquids = await liquidsOf(bound);
  const { seconds, lowS, highS, steps, repeats, cycles } = plan;
  const { items } = await readTimeline({
    now,
    rigId,
    draft: {
      liquids,
      campaign: {
        id: "",
        rigId,
        name: "This campaign",
        state: "queued",
        sensor: sensor.serial,
        definition,
        cursor: null,
        startAt: startAt ?? null,
        startedClock: null,
        planned: { seconds, lowS, highS, steps, repeats, cycles },
        priority,
        nominalF0Hz: sensor.nominalF0Hz,
        nominalQ: sensor.nominalQ,
        holds: [],
      },
    },
  });
  const lane = items[0];
  const own = lane?.campaigns.find(({ id }) => id === "");
  if (!lane || !own) return null;
  const fromMs = Date.parse(own.from);
  const takenBefore = (port: number, slot: string) => {
    const needed = lane.needs.ports.find((one) => one.port === port);
    return needed ? Math.max(0, needed.ml + needed.inLineMl - (plan.neededMl[slot] ?? 0)) : 0;
  };
  const segments = rig.abilities
    ? forecast(definition, start(definition), { nowMs: fromMs, timeZone: rig.timeZone, abilities: rig.abilities, nominal: { f0Hz: sensor.nominalF0Hz, q: sensor.nominalQ } }, MOST_STEPS)
    : [];
  const rings = peopleNeeded({
    definition,
    segments,
    fromMs,
    isMounted: sensor.rigId === rigId,
    bottles: Object.fromEntries(
      bound.map(({ slot, port, lot, onPort }) => [slot, { ml: onPort?.lotId === lot.id ? Math.max(0, onPort.remainingMl - takenBefore(port, slot)) : 0, letter: liquids.find((liquid) => liquid.slot === slot)?.letter ?? "" }]),
    ),
    wasteMl: rig.wasteMl,
    wasteCapacityMl: rig.wasteCapacityMl,
  });
  return { lane, from: own.from, end: own.end, people: rings.map(({ at, label }) => ({ at: new Date(at).toISOString(), label })) };
}

/** The draft's liquids as strips draw them; it has no id yet. */
async function liquidsOf(bound: Checked["bound"]): Promise<SlotLiquid[]> {
  const found = await rows<{ lotId: string; letter: string; name: string; model: string; massFraction: number | null; table: PropertyRow[] | null }>(
    `select lot.id as "lotId", q.letter, q.name, q.model, q.mass_fraction as "massFraction", q.property_table as "table"
       from lot join liquid q on q.id = lot.liquid_id where lot.id = any($1::bigint[])`,
    [bound.map(({ lot }) => lot.id)],
  );
  return bound.flatMap(({ slot, port, lot, liquid }) => {
    const of = found.find(({ lotId }) => lotId === lot.id);
    return of ? [{ campaignId: "", slot, port, lotId: lot.id, lot: lot.code, liquidId: liquid.id, name: of.name, letter: of.letter, tint: tintOf(typicalViscosityMPaS(of)) }] : [];
  });
}
