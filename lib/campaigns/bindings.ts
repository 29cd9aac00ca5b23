import type { Transaction } from "sequelize";
import { slotsOf } from "@/lib/campaigns/slots-of";
import { row, rows } from "@/lib/db";
import { conflict, impossible, type FieldError } from "@/lib/errors";
import type { CautionLiquid } from "@/lib/campaigns/cautions";
import type { Definition } from "@/lib/protocol/schema";
import type { RigAbilities } from "@/lib/protocol/types";

export type SlotBindings = Readonly<Record<string, { port: number; lotId: string }>>;

export type Chosen = {
  protocolName: string;
  version: number;
  definition: Definition;
  sensor: { id: string; serial: string; readout: "velocity" | "displacement"; nominalF0Hz: number; nominalQ: number; rigId: string | null };
  rig: {
    id: string;
    name: string;
    timeZone: string;
    abilities: (RigAbilities & { kinds?: string[] }) | null;
    ports: number;
    wasteCapacityMl: number | null;
    wasteMl: number;
    clock: Date | null;
  };
};

export type BoundSlot = {
  slot: string;
  port: number;
  lot: { id: string; code: string; expiresAt: Date | null };
  liquid: CautionLiquid;
  /** What stands on the port now. */
  onPort: { lotId: string; lotCode: string; liquidId: string; liquidName: string; remainingMl: number } | null;
};

type Choice = { protocolVersionId: string; sensorId: string; rigId: string; now: Date };

/** The protocol version, sensor and rig of a campaign to be. @throws AppError 422 naming each that does not exist, 409 naming each that is retired. */
export async function readChosen({ protocolVersionId, sensorId, rigId, now }: Choice, transaction?: Transaction): Promise<Chosen> {
  const version = await row<Pick<Chosen, "protocolName" | "version" | "definition"> & { retired: boolean }>(
    `select p.name as "protocolName", v.version, v.definition, p.retired_at is not null as retired from protocol_version v join protocol p on p.id = v.protocol_id where v.id = $1`,
    [protocolVersionId],
    transaction,
  );
  const sensor = await row<Chosen["sensor"] & { retired: boolean }>(
    `select s.id, s.serial, s.readout, s.nominal_f0_hz as "nominalF0Hz", s.nominal_q as "nominalQ", s.retired_at is not null as retired, m.rig_id as "rigId"
       from sensor s left join mount m on m.sensor_id = s.id and upper_inf(m.period) where s.id = $1`,
    [sensorId],
    transaction,
  );
  const rig = await row<Chosen["rig"] & { retired: boolean }>(
    `select id, name, time_zone as "timeZone", abilities, ports, waste_capacity_ml as "wasteCapacityMl", waste_ml as "wasteMl",
            retired_at is not null as retired, case when clock = 'real' then $2::timestamptz else reported_clock end as clock
       from rig where id = $1`,
    [rigId, now],
    transaction,
  );
  const missing: FieldError[] = [];
  if (!version) missing.push({ path: "protocolVersionId", message: "There is no such protocol version" });
  if (!sensor) missing.push({ path: "sensorId", message: "There is no such sensor" });
  if (!rig) missing.push({ path: "rigId", message: "There is no such rig" });
  if (!version || !sensor || !rig) throw refused(missing);
  const { retired: protocolRetired, ...chosen } = version;
  const retired: FieldError[] = [];
  if (protocolRetired) retired.push({ path: "protocolVersionId", message: `The protocol ${version.protocolName} is retired; bring it back or choose another` });
  if (sensor.retired) retired.push({ path: "sensorId", message: `${sensor.serial} is retired` });
  if (rig.retired) retired.push({ path: "rigId", message: `${rig.name} is retired` });
  if (retired.length > 0) throw conflict(retired.map(({ message }) => message).join(". "), "retired", { errors: retired });
  return { ...chosen, sensor, rig };
}

/** Every slot of the protocol with its port and lot. @throws AppError 422 naming each that is missing, doubled or not there. */
export async function readBindings(chosen: Chosen, slots: SlotBindings, transaction?: Transaction): Promise<BoundSlot[]> {
  const wanted = slotsOf(chosen.definition);
  const errors: FieldError[] = wanted
    .filter((slot) => !Object.hasOwn(slots, slot))
    .map((slot) => ({ path: `slots.${slot}`, message: `The protocol needs a port and a lot for ${slot}` }));
  const byPort = new Map<number, string>();
  for (const [slot, { port }] of Object.entries(slots)) {
    const other = byPort.get(port);
    if (!wanted.includes(slot)) errors.push({ path: `slots.${slot}`, message: `The protocol has no slot ${slot}` });
    else if (port > chosen.rig.ports) errors.push({ path: `slots.${slot}.port`, message: `${chosen.rig.name} has no port ${port}; it has ${chosen.rig.ports}` });
    else if (other) errors.push({ path: `slots.${slot}.port`, message: `Port ${port} is taken by ${other}` });
    byPort.set(port, slot);
  }
  const lots = await lotsById(Object.values(slots).map(({ lotId }) => lotId), transaction);
  for (const [slot, { lotId }] of Object.entries(slots)) if (!lots.has(lotId)) errors.push({ path: `slots.${slot}.lotId`, message: "There is no such lot" });
  if (errors.length > 0) throw refused(errors);

  const onPorts = await bottles(chosen.rig.id, transaction);
  return wanted.flatMap((slot) => {
    const { port, lotId } = slots[slot];
    const lot = lots.get(lotId);
    return lot ? [{ slot, port, ...lot, onPort: onPorts.get(port) ?? null }] : [];
  });
}

export const refused = (errors: FieldError[]) =>
  impossible(errors.map(({ message }) => message).join(". "), { errors });

async function lotsById(ids: readonly string[], transaction?: Transaction): Promise<Map<string, Pick<BoundSlot, "lot" | "liquid">>> {
  const found = await rows<{ id: string; code: string; expiresAt: Date | null; liquidId: string } & Omit<CautionLiquid, "id">>(
    `select lot.id, lot.code, lot.expires_at as "expiresAt", q.id as "liquidId", q.name, q.ghs, q.flash_point_c as "flashPointC", q.waste, q.not_with as "notWith"
       from lot join liquid q on q.id = lot.liquid_id where lot.id = any($1::bigint[])`,
    [[...new Set(ids)]],
    transaction,
  );
  return new Map(found.map(({ id, code, expiresAt, liquidId, ...liquid }) => [id, { lot: { id, code, expiresAt }, liquid: { id: liquidId, ...liquid } }]));
}

async function bottles(rigId: string, transaction?: Transaction): Promise<Map<number, NonNullable<BoundSlot["onPort"]>>> {
  const found = await rows<{ port: number } & NonNullable<BoundSlot["onPort"]>>(
    `select p.number as port, lot.id as "lotId", lot.code as "lotCode", q.id as "liquidId", q.name as "liquidName", p.remaining_ml as "remainingMl"
       from port p join load l on l.id = p.load_id join lot on lot.id = l.lot_id join liquid q on q.id = lot.liquid_id where p.rig_id = $1`,
    [rigId],
    transaction,
  );
  return new Map(found.map(({ port, ...bottle }) => [port, bottle]));
}
