/** Shapes of JSON columns that no schema elsewhere owns. */

export type AgentAbilities = {
  minHz: number;
  maxHz: number;
  maxPoints: number;
  maxDriveV: number;
  minTemperatureC?: number;
  maxTemperatureC?: number;
  ports: number;
  kinds: string[];
  repeatable?: string[];
};

export type PropertyRow = { temperatureC: number; densityKgM3: number; viscosityMPaS: number };

export type CertificateRow = {
  temperatureC: number;
  densityKgM3: number;
  uDensityKgM3: number;
  viscosityMPaS?: number;
  uViscosityMPaS?: number;
};

/** What the estimate said when the campaign was queued. */
export type PlannedCampaign = { seconds: number; lowS: number; highS: number; steps: number; repeats: number; cycles: number };

/** How far a physical act had come, as heartbeats told. */
export type StepProgress = { volumeMl?: number; times?: number; seconds?: number };

export type StepFailure = { code: string; message: string; retry: boolean };

/** How a fit run fits; `readout` in place of the protocol's. */
export type FitSettings = { offsetSlope: boolean; readout?: "velocity" | "displacement" };

/** A limit that a fit run breaks, where it breaks it first. */
export type FoundOnRefit = { limitId: string; kind: string; phaseId: string; stepId: string; cycle: number; value: number; limit: number; unit: string; text: string };

/** Why a file was refused: what its sender was told. */
export type ImportProblem = { detail: string; errors: { path: string; message: string }[]; errorCount: number };

/** A time range as Sequelize reads and writes it. */
export type DateRange = [
  { value: Date; inclusive: boolean },
  { value: Date | null; inclusive: boolean } | null,
];
