/** The rig agent's side of the HTTP contract, as much of it as this agent uses. */

export type SweepParams = { startHz: number; stopHz: number; points: number; dwellS: number; driveV: number };

type StepBase = {
  id: string;
  campaignId: string;
  campaignNumber: number;
  sequence: number;
  attempt: number;
  lease: string;
  resumeFrom: number;
  missing?: [from: number, to: number][];
  done?: Done;
  cycle: number;
  label: string;
};

export type Done = { volumeMl?: number; times?: number; seconds?: number };

export type MeasureStep = StepBase & {
  kind: "measure";
  role?: string;
  params: {
    medium: string;
    liquid?: { slot: string; port: number; name: string };
    repeats: number;
    pauseS: number;
    sweep: SweepParams;
  };
};
export type FillStep = StepBase & { kind: "fill"; params: { port: number; volumeMl: number; flowMlPerMin?: number } };
export type RinseStep = StepBase & {
  kind: "rinse";
  params: { port: number; volumeMl: number; times: number; flowMlPerMin?: number };
};
export type DrainStep = StepBase & { kind: "drain"; params: Record<string, never> };
export type DryStep = StepBase & { kind: "dry"; params: { seconds: number; flowMlPerMin?: number } };
export type SettleStep = StepBase & {
  kind: "settle";
  params: { temperatureC: number; toleranceC: number; holdS: number; timeoutS: number };
};

export type Step = MeasureStep | FillStep | RinseStep | DrainStep | DryStep | SettleStep;

export type Wish = "none" | "hold" | "stop";

type Volts = { re: number[]; im: number[] } | { magnitude: number[] };

/** What was measured, in one of the forms that the contract takes. */
export type Measured =
  | { sweep: { startHz: number; stopHz: number } & Volts }
  | ({ frequencyHz: number[] } & Volts)
  | { ringDown: { sampleHz: number; startS: number; volts: number[] } }
  | { fitted: { f0Hz: number; q: number; f0StdHz: number; qStd: number; amplitudeV: number } };

export type Reading = {
  index: number;
  takenAt: string;
  durationS: number;
  temperatureC: number;
  pressurePa: number;
  humidityPercent: number;
} & Measured;

export type FailureCode = "port-empty" | "waste-full" | "pump" | "thermostat" | "instrument" | "sensor" | "timeout" | "other";

export type Outcome =
  | { outcome: "done" }
  | { outcome: "interrupted" }
  | { outcome: "failed"; failure: { code: FailureCode; message: string; retry: boolean } };

export type HelloAnswer = {
  rig: { id: string; name: string; clock: string };
  session: string;
  leaseS: number;
  heartbeatS: number;
  waitS: number;
  maxBodyBytes: number;
  maxReadings: number;
};

export type HeartbeatAnswer = { wish: Wish; dueAt?: string };

export type ReadingsAnswer = {
  stored: number[];
  alreadyStored: number[];
  differs: number[];
  lease: "current" | "superseded";
  wish: Wish;
};

export type FinishAnswer = { step: string; next: "ask" | "wait" };
