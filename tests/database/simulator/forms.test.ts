import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { startFastPath } from "@/jobs/fast-path";
import { sequelize } from "@/lib/db";
import { listener } from "@/lib/listener";
import { LEFT_OUT } from "@/lib/numerics/resonance/flags";
import type { TruthRecord } from "@/rig-simulator/rig";
import { serveAgentRoutes } from "./agent-routes";
import { runCampaign } from "./run-campaign";

let server: Awaited<ReturnType<typeof serveAgentRoutes>>;
let stopFastPath: () => Promise<void>;
const errors: unknown[] = [];

beforeAll(async () => {
  server = await serveAgentRoutes();
  stopFastPath = await startFastPath({ onError: (_, error) => errors.push(error), onMail: async () => {}, onRefit: async () => {}, onImport: async () => {}, onAdvanced: async () => {} });
});
afterAll(async () => {
  await server.stop();
  await stopFastPath();
  await listener().close();
  await sequelize.close();
});

type Reading = { sequence: number; idx: number; role: string; f0_hz: number | null; f0_std_hz: number; q: number; q_std: number; fit_flags: number };
type Phase = { sequence: number; n: number; n_used: number; f0_mean: number; f0_u: number; q_mean: number; q_u: number };

const DISCARDED_IN_AIR = 1;
const mean = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;

const forms = [
  { form: "complex", grid: "even", readout: "displacement" },
  { form: "complex", grid: "downward", readout: "velocity" },
  { form: "complex", grid: "uneven", readout: "velocity" },
  { form: "magnitude", grid: "even", readout: "velocity" },
  { form: "magnitude", grid: "downward", readout: "displacement" },
  { form: "magnitude", grid: "uneven", readout: "velocity" },
  { form: "ringDown", grid: "even", readout: "velocity" },
  { form: "fitted", grid: "even", readout: "velocity" },
] as const;

describe("a campaign from the agent's first word to its phase values", () => {
  it.each(forms)("agrees with the simulated truth: sent as $form, $grid, $readout", { timeout: 120_000 }, async ({ form, grid, readout }) => {
    const truths = new Map<string, TruthRecord>();
    const left = await runCampaign(server.url, {
      readout,
      scenario: { sends: { form, grid }, signal: { noiseV: 2e-5 } },
      onTruth: (record) => truths.set(`${record.sequence}/${record.index}`, record),
    });
    expect(left.state).toBe("finished");
    const readings = (left.readings as Reading[]).filter(({ role }) => role !== "find");
    const phases = left.phases as Phase[];
    expect(readings).toHaveLength(66);
    expect(phases).toHaveLength(6);

    // Each repeat: within the error that its own fit states.
    const used = readings.filter(({ fit_flags }) => (fit_flags & LEFT_OUT) === 0);
    expect(used.length).toBeGreaterThanOrEqual(65);
    const truthOf = ({ sequence, idx }: { sequence: number; idx: number }): TruthRecord => {
      const truth = truths.get(`${sequence}/${idx}`);
      if (!truth) throw new Error(`no truth behind reading ${sequence}/${idx}`);
      return truth;
    };
    const pulls = {
      f0: used.map((reading) => ((reading.f0_hz ?? NaN) - truthOf(reading).f0Hz) / reading.f0_std_hz),
      q: used.map((reading) => (reading.q - truthOf(reading).q) / reading.q_std),
    };
    for (const pull of [pulls.f0, pulls.q]) {
      expect(Math.abs(mean(pull)) * Math.sqrt(pull.length)).toBeLessThan(4);
      // χ² of 66: 4 standard deviations √(2/66) either way.
      expect(mean(pull.map((z) => z * z))).toBeGreaterThan(1 - 0.7);
      expect(mean(pull.map((z) => z * z))).toBeLessThan(1 + 0.7);
    }

    // Each phase: within the uncertainty of its mean.
    for (const phase of phases) {
      const of = used.filter(({ sequence, role, idx }) => sequence === phase.sequence && !(role === "reference" && idx < DISCARDED_IN_AIR));
      expect(phase.n_used).toBe(of.length);
      expect(Math.abs(phase.f0_mean - mean(of.map((reading) => truthOf(reading).f0Hz)))).toBeLessThan(4 * phase.f0_u);
      expect(Math.abs(phase.q_mean - mean(of.map((reading) => truthOf(reading).q)))).toBeLessThan(4 * phase.q_u);
    }
    expect(errors).toEqual([]);
  });
});
