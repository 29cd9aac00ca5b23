import type { CampaignProblem, Choices } from "@/lib/campaigns/draft-schema";
import type { Draft } from "./use-draft";

/** What puts a problem right: a change of the draft, a dialog, or another page. */
export type Repair =
  | { do: "change"; label: string; changes: Partial<Draft> }
  | { do: "load"; label: string; rigId: string; port: number }
  | { do: "mount"; label: string; sensorId: string; rigId: string }
  | { do: "open"; label: string; href: string };

type Known = Pick<Draft, "protocolVersionId" | "sensorId" | "rigId" | "slots">;

/** The repairs of a problem that the check found, the nearest first; none for what only takes notice. */
export function repairsOf({ path }: Pick<CampaignProblem, "path">, draft: Known, choices: Choices): Repair[] {
  const [where, slot] = path.split(/\.(.*)/s);
  if (where === "slots" && slot) return ofSlot(slot, draft, choices);
  if (where === "sensorId") return ofSensor(draft, choices);
  if (where === "rigId") return draft.rigId ? [{ do: "open", label: "Open the rig", href: `/rigs/${draft.rigId}` }] : [];
  const protocolId = choices.versions.find(({ id }) => id === draft.protocolVersionId)?.protocolId;
  return protocolId ? [{ do: "open", label: "Change the protocol", href: `/protocols/${protocolId}/edit` }] : [];
}

function ofSlot(slot: string, { rigId, slots }: Known, { rigs, lots }: Choices): Repair[] {
  const binding = slots[slot];
  const rig = rigs.find(({ id }) => id === rigId);
  if (!rig || !binding || binding.port === null) return [];
  const { port, lotId } = binding;
  const lotById = (id: string | null) => lots.find((lot) => lot.id === id);
  const wanted = lotById(lotId);
  const standing = lotById(rig.ports.find(({ number }) => number === port)?.lotId ?? null);
  const isTaken = (number: number) => Object.values(slots).some((other) => other.port === number);
  const elsewhere = rig.ports.find(({ number, lotId: on }) => on === lotId && number !== port && !isTaken(number));
  const bindTo = (changes: Partial<typeof binding>): Partial<Draft> => ({ slots: { ...slots, [slot]: { ...binding, ...changes } } });
  return [
    ...(standing && standing.id !== lotId && standing.liquidName === wanted?.liquidName ? [{ do: "change" as const, label: `Use lot ${standing.code}`, changes: bindTo({ lotId: standing.id }) }] : []),
    ...(elsewhere ? [{ do: "change" as const, label: `Use port ${elsewhere.number}`, changes: bindTo({ port: elsewhere.number }) }] : []),
    { do: "load", label: `Load port ${port}`, rigId, port },
  ];
}

function ofSensor({ sensorId, rigId }: Known, { sensors, rigs }: Choices): Repair[] {
  const sensor = sensors.find(({ id }) => id === sensorId);
  if (!sensor || !rigId) return [];
  const home = rigs.find(({ id }) => id === sensor.rigId && id !== rigId);
  return [
    { do: "mount", label: `Mount ${sensor.serial}`, sensorId, rigId },
    ...(home ? [{ do: "change" as const, label: `Take ${home.name} instead`, changes: { rigId: home.id } }] : []),
  ];
}
