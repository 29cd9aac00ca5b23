import { row } from "@/lib/db";
import { impossible, type FieldError } from "@/lib/errors";
import { readLaboratory } from "@/lib/laboratory";
import { demand, type Actor } from "@/lib/people/actor";
import { estimateWithProblems, type RigForCheck, type SensorForCheck } from "@/lib/protocol/problems";
import type { DefinitionInput } from "@/lib/protocol/schema";
import type { RigAbilities } from "@/lib/protocol/types";
import { checkedDefinition } from "@/lib/protocols/checked-definition";
import { ANY_RIG, ANY_SENSOR, planAhead } from "@/lib/protocols/plan";
import type { EstimateAnswer } from "@/lib/protocols/schema";

type Question = { by: Actor; now: Date; definition: DefinitionInput; rigId?: string; sensorId?: string };

type RigRow = { name: string; timeZone: string; abilities: (RigAbilities & { kinds?: string[] }) | null; ports: number; wasteCapacityMl: number | null; clock: Date | null };

/** What a definition would take and what is wrong or odd with it, begun now on the rig with the sensor where they are named. Nothing is stored. */
export async function estimateProtocol({ by, now, definition: given, rigId, sensorId }: Question): Promise<EstimateAnswer> {
  demand(by, "read");
  const definition = checkedDefinition(given);
  const [rig, sensor, laboratory] = await Promise.all([rigId && readRig(rigId, now), sensorId && readSensor(sensorId), readLaboratory()]);
  const missing: FieldError[] = [
    ...(rigId && !rig ? [{ path: "rigId", message: "There is no such rig" }] : []),
    ...(sensorId && !sensor ? [{ path: "sensorId", message: "There is no such sensor" }] : []),
  ];
  if (missing.length > 0) throw impossible(missing.map(({ message }) => message).join(". "), { errors: missing });

  const world = {
    nowMs: ((rig && rig.clock) || now).getTime(),
    timeZone: rig ? rig.timeZone : laboratory.timeZone,
    abilities: (rig && rig.abilities) || ANY_RIG,
    nominal: sensor ? { f0Hz: sensor.nominalF0Hz, q: sensor.nominalQ } : ANY_SENSOR,
  };
  const forCheck: RigForCheck | undefined =
    rig && rig.abilities ? { timeZone: rig.timeZone, abilities: { ...rig.abilities, ports: rig.ports }, wasteCapacityMl: rig.wasteCapacityMl } : undefined;
  const { seconds, steps, repeats, phases, cycles, mlPerSlot, wasteMl, atMost, people, isExact, problems } = estimateWithProblems(definition, {
    world,
    rig: forCheck,
    sensor: sensor || undefined,
  });
  const unknownRig = rig && !rig.abilities ? [{ path: "", severity: "warning" as const, message: `The agent of ${rig.name} has not reported yet what the rig can do, so that nothing was checked against it.` }] : [];
  return { seconds, steps, repeats, phases, cycles, mlPerSlot, wasteMl, atMost, people, isExact, ...planAhead(definition, world), problems: [...problems, ...unknownRig] };
}

const readRig = (rigId: string, now: Date) =>
  row<RigRow>(
    `select name, time_zone as "timeZone", abilities, ports, waste_capacity_ml as "wasteCapacityMl",
            case when clock = 'real' then $2::timestamptz else reported_clock end as clock from rig where id = $1`,
    [rigId, now],
  );

const readSensor = (sensorId: string) =>
  row<SensorForCheck>(`select readout, nominal_f0_hz as "nominalF0Hz", nominal_q as "nominalQ" from sensor where id = $1`, [sensorId]);
