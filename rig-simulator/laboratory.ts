import { readFileSync } from "node:fs";
import { z } from "zod";
import { Refused } from "./agent/client";
import { sleep } from "./clock";
import { startRig, type RigEntry, type StartOptions } from "./start-rig";

const entries = z.array(
  z.strictObject({
    url: z.url(),
    token: z.string().min(1),
    scenario: z.string().min(1),
    seed: z.int().optional(),
    speed: z.string().optional(),
    clockStart: z.string().optional(),
  }),
);

const lookEveryMs = 2000;
const afterFailureMs = 15_000;

type Options = Omit<StartOptions, "untilIdle" | "truthFile"> & { file: string };

/**
 * Runs every rig that the file names, in one process. Waits for the file, looks again every 2 s, starts what is new and ends what is
 * gone or changed. A rig that fails is said so and tried again; the others go on.
 */
export async function runLaboratory({ file, signal, stateFolder, log }: Options): Promise<void> {
  const running = new Map<string, AbortController>();
  let said = "";
  const sayOnce = (text: string): void => {
    if (text !== said) log(text);
    said = text;
  };

  while (!signal.aborted) {
    const wanted = readEntries(file, sayOnce);
    if (wanted) {
      const names = new Map(wanted.map((entry) => [JSON.stringify(entry), entry]));
      for (const [name, controller] of running) {
        if (names.has(name)) continue;
        controller.abort(new Error("no longer in the file"));
        running.delete(name);
      }
      for (const [name, entry] of names) {
        if (running.has(name)) continue;
        const controller = new AbortController();
        running.set(name, controller);
        void keepRunning(entry, { signal: AbortSignal.any([signal, controller.signal]), stateFolder, log });
      }
    }
    await sleep(lookEveryMs, signal).catch(() => undefined);
  }
}

async function keepRunning(entry: RigEntry, options: StartOptions): Promise<void> {
  while (!options.signal.aborted) {
    try {
      await startRig(entry, options);
    } catch (error) {
      const why = error instanceof Refused && error.status === 401 ? "the server does not know this token" : (error as Error).message;
      options.log(`${entry.scenario}: ${why}; trying again in ${afterFailureMs / 1000} s`);
      await sleep(afterFailureMs, options.signal).catch(() => undefined);
    }
  }
}

function readEntries(file: string, say: (text: string) => void): RigEntry[] | undefined {
  let text: string;
  try {
    text = readFileSync(file, "utf8");
  } catch {
    say(`waiting for ${file}`);
    return undefined;
  }
  try {
    const result = entries.safeParse(JSON.parse(text));
    if (result.success) {
      say(`${result.data.length} rigs in ${file}`);
      return result.data;
    }
    say(`${file} is not a list of rigs:\n${z.prettifyError(result.error)}`);
  } catch (error) {
    say(`${file} is not JSON: ${(error as Error).message}`);
  }
  return undefined;
}
