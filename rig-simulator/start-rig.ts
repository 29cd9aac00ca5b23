import { appendFileSync } from "node:fs";
import { badNetwork } from "./agent/bad-network";
import { runAgent } from "./agent/run-agent";
import { httpTransport } from "./agent/transport";
import { parseSpeed, sleep } from "./clock";
import { loadScenario } from "./load-scenario";
import { memoryStore, Rig } from "./rig";
import { fileStore, rigDigest } from "./state-file";

export type RigEntry = {
  url: string;
  token: string;
  scenario: string;
  seed?: number;
  speed?: string;
  /** Where a simulated clock begins, RFC 3339; now unless given. */
  clockStart?: string;
};

export type StartOptions = {
  signal: AbortSignal;
  stateFolder?: string;
  untilIdle?: boolean;
  /** A fast rig ends here by its own clock; the step in hand is given back for the next agent. */
  until?: Date;
  /** Gets the true f0 and Q of every reading, one JSON object a line. */
  truthFile?: string;
  log: (text: string) => void;
};

/** Runs one rig and its agent until the signal is aborted, its clock has come to `until`, or, with `untilIdle`, there is nothing left to do. */
export async function startRig(entry: RigEntry, { signal, stateFolder, untilIdle, until, truthFile, log }: StartOptions): Promise<void> {
  const { url, token, seed = 1 } = entry;
  const scenario = loadScenario(entry.scenario);
  const clockStartMs = entry.clockStart === undefined ? undefined : Date.parse(entry.clockStart);
  if (Number.isNaN(clockStartMs)) throw new Error(`"${entry.clockStart}" is not a time such as 2026-03-02T08:00:00Z`);

  // Not the address: the same rig may be asked to reach its server at another port.
  const identity = [token, scenario.name, String(seed)];
  const rig = new Rig({
    scenario,
    seed,
    speed: parseSpeed(entry.speed ?? "real"),
    clockStartMs,
    onTruth: truthFile === undefined ? undefined : (record) => appendFileSync(truthFile, `${JSON.stringify(record)}\n`),
    store: stateFolder === undefined ? memoryStore() : fileStore(stateFolder, identity),
  });
  await runAgent({
    rig,
    transport: badNetwork(httpTransport({ url, token }), rig, sleep),
    instance: rigDigest(identity),
    signal,
    untilIdle,
    untilMs: until?.getTime(),
    log: (text) => log(`${scenario.rig.name}: ${text}`),
  });
}
