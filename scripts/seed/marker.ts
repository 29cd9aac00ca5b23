import { change, row, rows } from "@/lib/db";
import { demoPeople } from "./people";

const NAME = "demo";

type Marker = { begunAt: Date; done: boolean };

/** How far the seeding of this database came; undefined before its first start. */
export async function readMarker(): Promise<Marker | undefined> {
  const found = await row<{ value: { begunAt: string; done: boolean } }>(`select value from setting where name = $1`, [NAME]);
  return found && { ...found.value, begunAt: new Date(found.value.begunAt) };
}

/** Notes the beginning. @throws when the database is somebody's own: people or rigs that the demo did not make. */
export async function begin(now: Date): Promise<Marker> {
  const strangers = await rows<{ email: string }>(`select email from person where not (email = any($1)) limit 3`, [demoPeople.map(({ email }) => email)]);
  if (strangers.length > 0) {
    throw new Error(`This database holds people of its own (${strangers.map(({ email }) => email).join(", ")}); the demo goes into an empty one only.`);
  }
  const rig = await row<{ name: string }>(`select name from rig limit 1`);
  if (rig) throw new Error(`This database holds a rig of its own (${rig.name}); the demo goes into an empty one only.`);
  await write({ begunAt: now, done: false });
  return { begunAt: now, done: false };
}

export const end = async (marker: Marker): Promise<void> => write({ ...marker, done: true });

async function write(marker: Marker): Promise<void> {
  await change(
    `insert into setting (name, value) values ($1, $2) on conflict (name) do update set value = excluded.value`,
    [NAME, JSON.stringify(marker)],
  );
}
