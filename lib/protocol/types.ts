import type { Definition, FillBlock, LeafBlock, SettleBlock } from "./schema";

/** What `next` needs to know of the world. Plain data, gathered by the caller; protocol time is rig time. */
export type Facts = {
  /** Protocol time, milliseconds since 1970 UTC. */
  nowMs: number;
  /** IANA zone of the rig: waits and dates are local to it. */
  timeZone: string;
  abilities: RigAbilities;
  /** Nominal or calibrated values of the sensor in air, for the first search. */
  nominal: { f0Hz: number; q: number };
  /** How the step that the cursor stands on ended; absent before the first step. */
  last?: { outcome: "done" | "failed" | "skipped"; phase?: PhaseFacts };
  /** References of the present mount and set-point: mean so far; `complete` once the baseline holds its n references. */
  baseline?: { f0Hz: number; q: number; n: number; complete: boolean };
  /** Newest good fit by `trackKey(medium, setPointC)`, of the present mount. */
  tracks: Readonly<Record<string, Track>>;
};

export type RigAbilities = {
  minHz: number;
  maxHz: number;
  maxPoints: number;
  maxDriveV: number;
  minTemperatureC?: number;
  maxTemperatureC?: number;
};

export type Track = { f0Hz: number; q: number };

/** A closed phase as decisions see it. Means are undefined when nothing counts. */
export type PhaseFacts = {
  f0Hz?: number;
  q?: number;
  n: number;
  nUsed: number;
  /** Fits flagged `edge` or `failed`. */
  unusable: number;
};

/** What is in the cell. `by` says what brought the liquid: only a `fill` is made again after parking. */
export type Cell =
  | { content: "air" | "unknown" }
  | { content: "liquid"; slot: string; volumeMl: number; sinceMs: number; by?: FillBlock };

/**
 * One turn of a container on the way to the present block, or the block itself (last). Ids survive versions, places in a
 * list need not. The marks from `pending` on belong to the last entry only.
 */
export type PathEntry = {
  id: string;
  turn?: number;
  stage?: "blocks" | "measure";
  /** On an `untilClean`: a person let it pass. */
  passed?: true;
  /** The block has not been made (again) yet; without it the path stands on the step last made. */
  pending?: true;
  /** What it did to the cell and the set-point has been taken into the cursor. */
  booked?: true;
  /** The step made, or to be made next, is the search for the resonance, not the measurement itself. */
  find?: true;
  /** 2 where the measurement is made once more because its first run was unusable. */
  attempt?: 2;
};

/** What a place in the protocol counts on: what is in the cell, and the `settle` that was last done (with its temperature). */
export type CellState = { cell: Cell; settled: SettleBlock | null };

/** Why a step is there that the protocol's main line does not name. */
export type DetourKind = "park" | "cleanAgain" | "reference" | "restore" | "find" | "again";

/** A way off the main line: what runs there and where it stands. The last in the list is the one under way. */
export type Detour = {
  kind: "park" | "cleanAgain" | "reference" | "restore";
  path: PathEntry[];
  /** The cycle its steps belong to. */
  cycle: number;
  /** The limits that asked for `cleanAgain`, also on the reference that follows it. */
  limitIds?: string[];
  /** On `reference`: the block to measure, and the medium that its `each` stands for. */
  measureId?: string;
  medium?: string;
  /** On `restore`: what the place it returns to counts on. */
  wanted?: CellState;
  /** On `restore`, once it is under way: the blocks that bring it about. */
  blocks?: LeafBlock[];
};

/** Where a campaign stands. Small JSON; stored with the step that it led to, in one transaction. */
export type Cursor = {
  /** Sequence number of the step last made; 0 before the first. */
  sequence: number;
  /** Turns of the outermost `repeat`, counted over the campaign; 0 outside any. */
  cycle: number;
  /** Counts turns begun, so that a later outermost `repeat` goes on counting. */
  cyclesBegun: number;
  path: PathEntry[];
  detours: Detour[];
  cell: Cell;
  /** Set by `settle`, null before the first. */
  setPointC: number | null;
  /** The `settle` that brought the set-point, its temperature resolved. */
  settled?: SettleBlock | null;
  /** Cell and set-point as the present cycle began. */
  cycleStart?: CellState;
  /** The first reference measured at the set-point it names. */
  reference?: { measureId: string; medium: string; setPointC: number | null };
  /** Limits that asked for `cleanAgain` and wait for the next phase boundary. */
  due?: { limitId: string; maxTimes: number }[];
  /** Turns of `cleanAgain` taken, by limit id, since that limit last was kept in the medium where it was broken. */
  cleanedAgain: Record<string, { times: number; medium: string }>;
  /** Why `next` last answered with a hold, other than for a failed step: that may be given out again and be done after all. */
  held?: "failure" | "untilClean" | "cleanAgain";
  /** Since a park began: what was there before. `begun` once a step of it was made. */
  parked?: CellState & { begun: boolean };
  /** Carried out by the following `next`. */
  redirection?: Exclude<Redirection, { kind: "cleanAgain" }>;
  /** The main line is at its end, a detour may still be under way. */
  ended?: true;
  /** Set when everything has been done. */
  finished?: true;
};

export type SweepParams = { startHz: number; stopHz: number; points: number; dwellS: number; driveV: number };

type StepBase = {
  sequence: number;
  blockId: string;
  cycle: number;
  setPointC: number | null;
  label: string;
  detour?: DetourKind;
};

/** A step as the interpreter makes it; the caller adds port and lot of a slot. */
export type StepPlan = StepBase &
  (
    | {
        kind: "measure";
        medium: string;
        role: "reference" | "check" | "sample" | "find";
        params: { repeats: number; discard: number; pauseS: number; sweep: SweepParams };
      }
    | { kind: "fill"; slot: string; params: { volumeMl: number; flowMlPerMin: number } }
    | { kind: "drain"; params: Record<string, never> }
    | { kind: "rinse"; slot: string; params: { volumeMl: number; times: number } }
    | { kind: "dry"; params: { seconds: number; flowMlPerMin?: number } }
    | { kind: "settle"; params: { temperatureC: number; toleranceC: number; holdS: number; timeoutS: number } }
    | { kind: "wait"; params: { dueAtMs: number } }
    | { kind: "ask"; params: { instruction: string; urgency: "low" | "normal" | "high" } }
  );

export type Action =
  | { do: "step"; step: StepPlan }
  | { do: "hold"; reason: "limit" | "failure"; text: string }
  | { do: "stop"; text: string }
  /** The park blocks are done; the campaign stays as it is (held or stopped). */
  | { do: "parked" }
  | { do: "finish" };

export type Next = { cursor: Cursor; action: Action };

/** What sends a cursor somewhere else than on. */
export type Redirection =
  | { kind: "park" }
  | { kind: "resume"; from: "here" | "phase" | "cycle" }
  /** After a re-mount, or back from being set aside: the reference of the present set-point comes first. */
  | { kind: "reference"; from: "phase" | "cycle" }
  | { kind: "cleanAgain"; limitId: string; maxTimes: number };

export type Interpreter = {
  start: (definition: Definition) => Cursor;
  next: (definition: Definition, cursor: Cursor, facts: Facts) => Next;
  redirect: (definition: Definition, cursor: Cursor, redirection: Redirection) => Next["cursor"] | { impossible: string };
};

export const trackKey = (medium: string, setPointC: number | null): string => `${medium}|${setPointC ?? ""}`;

