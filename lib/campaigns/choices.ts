import { rows } from "@/lib/db";
import type { Choices } from "@/lib/campaigns/draft-schema";
import { slotsOf } from "@/lib/campaigns/slots-of";
import { typicalViscosityMPaS } from "@/lib/liquids/property-model";
import { tintOf } from "@/lib/liquids/tint";
import type { Definition } from "@/lib/protocol/schema";
import { OCCUPIES } from "@/lib/rigs/read";
import type { PropertyRow } from "@/models/json";

type VersionRow = Omit<Choices["versions"][number], "savedAt" | "slots"> & { savedAt: Date; definition: Definition };
type LotRow = Omit<Choices["lots"][number], "expiresAt" | "tint"> & { expiresAt: Date | null; model: string; massFraction: number | null; table: PropertyRow[] | null };

/** Protocol versions, sensors, rigs with their ports, and lots: what the screen that queues a campaign chooses from. */
export async function findChoices(): Promise<Choices> {
  const [versions, sensors, rigs, lots] = await Promise.all([
    rows<VersionRow>(
      `select v.id, v.protocol_id as "protocolId", p.name, v.version, v.created_at as "savedAt", w.name as "savedBy", v.definition
         from protocol_version v join protocol p on p.id = v.protocol_id left join person w on w.id = v.created_by
        where p.retired_at is null order by p.name, v.version desc limit 500`,
    ),
    rows<Choices["sensors"][number]>(
      `select s.id, s.serial, s.kind, m.rig_id as "rigId" from sensor s left join mount m on m.sensor_id = s.id and upper_inf(m.period)
        where s.retired_at is null order by s.serial limit 500`,
    ),
    rows<Choices["rigs"][number]>(
      `select r.id, r.name, r.time_zone as "timeZone", r.waste_capacity_ml as "wasteCapacityMl",
              (select count(*)::int from campaign c where c.rig_id = r.id and (c.state = 'queued' or ${OCCUPIES})) as ahead,
              coalesce((select jsonb_agg(jsonb_build_object('number', p.number, 'lotId', l.lot_id::text, 'remainingMl', p.remaining_ml) order by p.number)
                          from port p left join load l on l.id = p.load_id where p.rig_id = r.id), '[]') as ports
         from rig r where r.retired_at is null order by r.name limit 500`,
    ),
    rows<LotRow>(
      `select lot.id, lot.code, lot.expires_at as "expiresAt", q.name as "liquidName", q.letter, q.model, q.mass_fraction as "massFraction", q.property_table as "table"
         from lot join liquid q on q.id = lot.liquid_id where q.retired_at is null order by q.name, lot.id desc limit 500`,
    ),
  ]);
  return {
    versions: versions.map(({ definition, savedAt, ...version }) => ({ ...version, savedAt: savedAt.toISOString(), slots: slotsOf(definition) })),
    sensors,
    rigs,
    lots: lots.map(({ model, massFraction, table, expiresAt, ...lot }) => ({
      ...lot,
      tint: tintOf(typicalViscosityMPaS({ name: lot.liquidName, model, massFraction, table })),
      expiresAt: expiresAt?.toISOString() ?? null,
    })),
  };
}
