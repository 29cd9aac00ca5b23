import type { Problem, RigForCheck, SensorForCheck } from "./problems";
import type { Block, Definition, Sweep } from "./schema";
import { visitBlocks } from "./visit-blocks";

type Report = (path: string, message: string) => void;

/** What the rig cannot do: kinds of steps, ports, temperatures, frequencies, points, drive. */
export function rigProblems(definition: Definition, { abilities }: RigForCheck, sensor?: SensorForCheck): Problem[] {
  const found: Problem[] = [];
  const report: Report = (path, message) => found.push({ path, severity: "error", message });
  const { minHz, maxHz, ports, kinds } = abilities;

  const slots = new Set<string>();
  visitBlocks(definition, (block, path) => {
    for (const slot of slotsOf(block)) slots.add(slot);
    if (kinds && isForAgents(block) && !kinds.includes(block.kind)) report(path, `The rig cannot ${block.kind}.`);
    if (block.kind === "measure") checkSweep(block.sweep, `${path}.sweep`, abilities, report);
    checkTemperatures(block, path, abilities, report);
  });
  if (ports !== undefined && slots.size > ports)
    report("blocks", `The protocol uses ${slots.size} slots (${[...slots].join(", ")}), the rig has ${ports} ${ports === 1 ? "port" : "ports"}.`);
  if (definition.search) {
    const { fromHz, toHz, points } = definition.search;
    if (toHz <= minHz || fromHz >= maxHz) report("search", `The search lies outside the rig's range of ${minHz} to ${maxHz} Hz.`);
    if (points > abilities.maxPoints) report("search.points", `The rig sweeps at most ${abilities.maxPoints} points.`);
  }
  if (sensor && (sensor.nominalF0Hz < minHz || sensor.nominalF0Hz > maxHz))
    report("blocks", `The sensor's resonance at ${sensor.nominalF0Hz} Hz lies outside the rig's range of ${minHz} to ${maxHz} Hz.`);
  return found;
}

function checkSweep(sweep: Sweep, path: string, { minHz, maxHz, maxPoints, maxDriveV }: RigForCheck["abilities"], report: Report): void {
  if (sweep.points > maxPoints) report(`${path}.points`, `The rig sweeps at most ${maxPoints} points.`);
  if (sweep.driveV > maxDriveV) report(`${path}.driveV`, `The rig drives with at most ${maxDriveV} V.`);
  if (sweep.centre !== "track" && (sweep.centre < minHz || sweep.centre > maxHz))
    report(`${path}.centre`, `The centre lies outside the rig's range of ${minHz} to ${maxHz} Hz.`);
}

function checkTemperatures(block: Block, path: string, { minTemperatureC, maxTemperatureC }: RigForCheck["abilities"], report: Report): void {
  const check = (temperatureC: number, at: string) => {
    if (minTemperatureC !== undefined && temperatureC < minTemperatureC) report(at, `The rig goes down to ${minTemperatureC} °C only.`);
    if (maxTemperatureC !== undefined && temperatureC > maxTemperatureC) report(at, `The rig goes up to ${maxTemperatureC} °C only.`);
  };
  if (block.kind === "settle" && block.temperatureC !== "each") check(block.temperatureC, `${path}.temperatureC`);
  if (block.kind === "forEach" && "temperaturesC" in block.over)
    for (const [index, temperatureC] of block.over.temperaturesC.entries()) check(temperatureC, `${path}.over.temperaturesC.${index}`);
}

function slotsOf(block: Block): string[] {
  if (block.kind === "forEach") return "slots" in block.over ? block.over.slots : [];
  if ("slot" in block) return block.slot === "each" ? [] : [block.slot];
  return block.kind === "measure" && block.medium !== "air" && block.medium !== "each" ? [block.medium] : [];
}

function isForAgents({ kind }: Block): boolean {
  return ["measure", "fill", "drain", "rinse", "dry", "settle"].includes(kind);
}
