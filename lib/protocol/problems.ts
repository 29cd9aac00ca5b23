import { cellProblems } from "./cell-problems";
import { estimate, type Estimate } from "./estimate";
import type { World } from "./made-up-world";
import { rigProblems } from "./rig-problems";
import type { Definition } from "./schema";
import type { RigAbilities } from "./types";
import { visitBlocks } from "./visit-blocks";

/** `error` has to be mended before a campaign can be queued, `warning` is to be looked at. Paths as in `parseDefinition`. */
export type Problem = { path: string; severity: "error" | "warning"; message: string };

export type RigForCheck = {
  timeZone: string;
  abilities: RigAbilities & { ports?: number; kinds?: readonly string[] };
  wasteCapacityMl?: number | null;
};
export type SensorForCheck = { readout?: "velocity" | "displacement" | null; nominalF0Hz: number; nominalQ: number };

/**
 * What is wrong or odd with a protocol, by itself and for a rig and a sensor where they are given. An estimate made before
 * saves making one.
 */
export function problems(definition: Definition, rig?: RigForCheck, sensor?: SensorForCheck, estimated?: Estimate): Problem[] {
  return [
    ...cellProblems(definition),
    ...namesProblems(definition),
    ...(rig ? rigProblems(definition, rig, sensor) : []),
    ...(rig && estimated ? amountProblems(estimated, rig) : []),
    ...(estimated?.steps === 0
      ? [{ path: "blocks", severity: "error" as const, message: "There is nothing to do: every date is over." }]
      : []),
    ...(sensor?.readout && sensor.readout !== definition.readout
      ? [
          {
            path: "readout",
            severity: "warning" as const,
            message: `The protocol reads ${definition.readout}, the sensor is entered with ${sensor.readout}; the protocol's counts.`,
          },
        ]
      : []),
  ];
}

/** Estimate and problems in one, as the editor shows them. */
export function estimateWithProblems(
  definition: Definition,
  { world, rig, sensor }: { world: World; rig?: RigForCheck; sensor?: SensorForCheck },
): Estimate & { problems: Problem[] } {
  const estimated = estimate(definition, world);
  return { ...estimated, problems: problems(definition, rig, sensor, estimated) };
}

function amountProblems({ wasteMl }: Estimate, { wasteCapacityMl }: RigForCheck): Problem[] {
  if (!wasteCapacityMl || wasteMl <= wasteCapacityMl) return [];
  const times = Math.ceil(wasteMl / wasteCapacityMl) - 1;
  return [
    {
      path: "blocks",
      severity: "warning",
      message: `About ${Math.round(wasteMl)} mL of waste do not fit into the container of ${wasteCapacityMl} mL: it has to be emptied ${times === 1 ? "once" : `${times} times`} on the way.`,
    },
  ];
}

/** Names that lead nowhere: a limit's medium, a `forEach` whose value nobody uses. */
function namesProblems(definition: Definition): Problem[] {
  const found: Problem[] = [];
  const media = new Set(["air"]);
  visitBlocks(definition, (block) => {
    if ("slot" in block) media.add(block.slot);
    if (block.kind === "measure") media.add(block.medium);
    if (block.kind === "forEach" && "slots" in block.over) for (const slot of block.over.slots) media.add(slot);
  });
  for (const [index, { medium }] of definition.limits.entries())
    if (medium !== undefined && !media.has(medium))
      found.push({ path: `limits.${index}.medium`, severity: "warning", message: `The protocol never names ${medium}, so this limit is never judged.` });

  visitBlocks(definition, (block, path) => {
    if (block.kind !== "forEach") return;
    const of = "slots" in block.over ? "slots" : "temperatures";
    let isUsed = false;
    visitBlocks({ blocks: block.blocks }, (inner) => {
      isUsed ||= of === "temperatures" ? inner.kind === "settle" && inner.temperatureC === "each" : usesEachSlot(inner);
    });
    if (!isUsed) found.push({ path, severity: "warning", message: `Nothing in it uses each of its ${of}.` });
  });
  return found;
}

function usesEachSlot(block: Definition["blocks"][number]): boolean {
  return ("slot" in block && block.slot === "each") || (block.kind === "measure" && block.medium === "each");
}
