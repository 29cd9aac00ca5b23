import path from "node:path";
import { parseArgs } from "node:util";
import { Refused } from "./agent/client";
import { runLaboratory } from "./laboratory";
import { loadScenario, scenarioNames } from "./load-scenario";
import { nominalInAir } from "./physics/truth";
import { startRig } from "./start-rig";

const dataFolder = process.env.LONGREED_DATA_DIR || "data";

const help = `Simulated rigs for Longreed. Each is an agent that speaks the HTTP contract only.

  npm run simulate -- run --url URL --token TOKEN --scenario NAME|FILE [options]
      One rig.
      --speed real|×N|fast   how fast its clock runs (default real; fast: as fast as it can)
      --seed N               chooses its noise (default 1)
      --clock-start TIME     where a simulated clock begins, e.g. 2026-03-02T08:00:00Z (default now)
      --truth FILE           append the true f0 and Q of every reading, one JSON object a line
      --until-idle           end when there is nothing left to do
      --no-state             forget the bottles and the clock at the end

  npm run simulate -- laboratory [--file FILE]
      All rigs of FILE (default demo-rigs.json in the data folder), in one process:
      [{ "url", "token", "scenario", "seed"?, "speed"?, "clockStart"? }, …]
      Waits for the file and follows its changes.

  npm run simulate -- scenarios
      What there is to choose from.

  Both keep their rigs' bottles and clocks in --state FOLDER (default simulator in the data folder, which is
  LONGREED_DATA_DIR or data).
`;

async function main(): Promise<number> {
  const { values, positionals } = parseArgs({
    allowPositionals: true,
    options: {
      help: { type: "boolean", short: "h" },
      url: { type: "string" },
      token: { type: "string" },
      scenario: { type: "string" },
      speed: { type: "string" },
      seed: { type: "string" },
      "clock-start": { type: "string" },
      truth: { type: "string" },
      "until-idle": { type: "boolean" },
      "no-state": { type: "boolean" },
      state: { type: "string", default: path.join(dataFolder, "simulator") },
      file: { type: "string", default: path.join(dataFolder, "demo-rigs.json") },
    },
  });
  const [command, ...rest] = positionals;
  if (values.help || command === undefined) {
    process.stdout.write(help);
    return command === undefined && !values.help ? 2 : 0;
  }
  if (rest.length > 0) throw new Error(`What does "${rest.join(" ")}" mean? See --help`);

  const ending = new AbortController();
  for (const name of ["SIGINT", "SIGTERM"] as const) process.once(name, () => ending.abort(new Error(name)));
  const common = { signal: ending.signal, stateFolder: values["no-state"] ? undefined : values.state, log };

  switch (command) {
    case "run": {
      const seed = values.seed === undefined ? 1 : Number(values.seed);
      if (!Number.isSafeInteger(seed)) throw new Error(`--seed must be a whole number, not "${values.seed}"`);
      await startRig(
        {
          url: required(values.url, "--url"),
          token: required(values.token, "--token"),
          scenario: required(values.scenario, "--scenario"),
          seed,
          speed: values.speed,
          clockStart: values["clock-start"],
        },
        { ...common, untilIdle: values["until-idle"], truthFile: values.truth },
      );
      return 0;
    }
    case "laboratory":
      await runLaboratory({ ...common, file: values.file });
      return 0;
    case "scenarios":
      for (const name of scenarioNames()) process.stdout.write(`${describe(name)}\n`);
      return 0;
    default:
      throw new Error(`There is no command "${command}": run, laboratory or scenarios. See --help`);
  }
}

function describe(name: string): string {
  const scenario = loadScenario(name);
  const { f0Hz, q } = nominalInAir(scenario);
  return `${name.padEnd(13)} ${scenario.description}\n${"".padEnd(13)} ${scenario.sensor.kind} ${scenario.sensor.serial}, in air ${f0Hz.toFixed(2)} Hz, Q ${q.toFixed(0)}`;
}

function required(value: string | undefined, name: string): string {
  if (!value) throw new Error(`${name} is missing. See --help`);
  return value;
}

function log(text: string): void {
  process.stdout.write(`${new Date().toISOString()} ${text}\n`);
}

main().then(
  (code) => {
    process.exitCode = code;
  },
  (error: unknown) => {
    process.stderr.write(`${error instanceof Refused ? `The server refused: ${error.message}` : (error as Error).message}\n`);
    process.exitCode = 1;
  },
);
