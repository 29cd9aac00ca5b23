import { row } from "@/lib/db";
import { mountSensor } from "@/lib/mounts/mount-sensor";
import { createSensor } from "@/lib/sensors/create";
import { loadScenario } from "@/rig-simulator/load-scenario";
import { nominalInAir } from "@/rig-simulator/physics/truth";
import type { Team } from "./people";
import type { Bench, DemoRig } from "./rigs";

/** Ids of sensors by their serial number. */
export type Sensors = Record<string, string>;

type NewSensor = Omit<Parameters<typeof createSensor>[0], "by" | "now">;

const inTheDrawer: NewSensor[] = [
  { serial: "WR-2209", kind: "wire", nominalF0Hz: 2744, nominalQ: 2260, radiusM: 0.00028, note: "Twin of WR-2207 from the same coil" },
  { serial: "PL-1183", kind: "plate", nominalF0Hz: 1632, nominalQ: 910, note: "Back from the edge polishing" },
];

type SeedSensors = { team: Team; rigs: Record<Bench, DemoRig>; now: Date };

/** Five sensors; three are clamped in the rigs whose simulated cells they are. */
export async function seedSensors({ team, rigs, now }: SeedSensors): Promise<Sensors> {
  const sensors: Sensors = {};
  for (const { id: rigId, scenario } of Object.values(rigs)) {
    const given = asWrittenDown(scenario);
    const sensorId = await ensure(given, team, now);
    sensors[given.serial] = sensorId;
    const mounted = await row(`select id from mount where sensor_id = $1`, [sensorId]);
    if (!mounted) await mountSensor({ by: team.operator, now, sensorId, rigId, note: "Hand-tight, then a quarter turn" });
  }
  for (const given of inTheDrawer) sensors[given.serial] = await ensure(given, team, now);
  return sensors;
}

/** A scenario's sensor with the nominal values in air that a laboratory would note. */
function asWrittenDown(scenario: string): NewSensor {
  const loaded = loadScenario(scenario);
  const { serial, kind, readout, body } = loaded.sensor;
  const { f0Hz, q } = nominalInAir(loaded);
  const radiusM = body.shape === "rod" ? body.radiusM : body.innerRadiusM;
  return { serial, kind, readout, nominalF0Hz: Math.round(f0Hz), nominalQ: Math.round(q / 10) * 10, radiusM };
}

async function ensure(given: NewSensor, { researcher }: Team, now: Date): Promise<string> {
  const found = await row<{ id: string }>(`select id from sensor where serial = $1`, [given.serial]);
  return found?.id ?? (await createSensor({ ...given, by: researcher, now })).id;
}
