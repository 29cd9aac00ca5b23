import { kindOfField, type NameOf } from "@/lib/audit/detail-lines";
import { campaignCode } from "@/lib/campaigns/code";
import { rows } from "@/lib/db";
import { idSchema } from "@/lib/http/ids";

/** How a thing of each kind is called, in SQL; `$n` are its ids. */
const SOURCES = {
  rig: "select 'rig', id, name from rig",
  sensor: "select 'sensor', id, serial from sensor",
  liquid: "select 'liquid', id, name from liquid",
  lot: "select 'lot', lot.id, q.name || ', ' || lot.code from lot join liquid q on q.id = lot.liquid_id",
  campaign: "select 'campaign', id, name from campaign",
  protocol: "select 'protocol', id, name from protocol",
  version: "select 'version', v.id, p.name || ', version ' || v.version from protocol_version v join protocol p on p.id = v.protocol_id",
  person: "select 'person', id, name from person",
  alarm: "select 'alarm', id, text from alarm",
  task: "select 'task', id, instruction from operator_task",
  agentToken: "select 'agentToken', t.id, t.name || ', ' || r.name from agent_token t join rig r on r.id = t.rig_id",
  "access token": "select 'access token', t.id, t.name || ', ' || p.name from access_token t join person p on p.id = t.person_id",
  invitation: "select 'invitation', id, email from invitation",
  maintenanceWindow: "select 'maintenanceWindow', w.id, r.name || ', ' || w.why from maintenance_window w join rig r on r.id = w.rig_id",
  notification: "select 'notification', id, subject from notification",
} as const;

type Kind = keyof typeof SOURCES;
const KINDS = Object.keys(SOURCES) as Kind[];
const idColumn = (kind: Kind) => /select '[^']+', (\S+),/.exec(SOURCES[kind])?.[1] ?? "id";

const QUERY = KINDS.map((kind, i) => `${SOURCES[kind]} where ${idColumn(kind)} = any($${i + 1}::bigint[])`).join(" union all ");

type Event = { entity: string; entityId: string; detail: Record<string, unknown> };

/** Names of all that a page of events speaks of, in one query. */
export async function namesIn(events: readonly Event[]): Promise<NameOf> {
  const wanted = new Map<string, Set<string>>(KINDS.map((kind) => [kind, new Set()]));
  const note = (kind: string | undefined, id: unknown) => {
    if (kind && typeof id === "string" && idSchema.safeParse(id).success) wanted.get(kind)?.add(id);
  };
  for (const { entity, entityId, detail } of events) {
    note(entity, entityId);
    collect(detail, detail, note);
  }
  const found = await rows<{ kind: string; id: string; name: string }>(
    `select * from (${QUERY}) as found (kind, id, name)`,
    KINDS.map((kind) => [...(wanted.get(kind) ?? [])]),
  );
  const names = new Map(found.map(({ kind, id, name }) => [`${kind} ${id}`, kind === "campaign" ? `${campaignCode(id)} ${name}` : name]));
  return (kind, id) => names.get(`${kind} ${id}`);
}

function collect(value: unknown, detail: Record<string, unknown>, note: (kind: string | undefined, id: unknown) => void, field = ""): void {
  if (Array.isArray(value)) for (const one of value) collect(one, detail, note, field);
  else if (typeof value === "object" && value !== null) for (const [name, inner] of Object.entries(value)) collect(inner, detail, note, name);
  else note(kindOfField(field, detail), value);
}
