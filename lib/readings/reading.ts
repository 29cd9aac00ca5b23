/** One reading as an agent sent it, checked and with its numbers in a typed array ready for the database. */
export type ReadingInput = {
  index: number;
  takenAt: Date;
  durationS?: number;
  temperatureC?: number;
  pressurePa?: number;
  humidityPercent?: number;
  record: SweepRecord;
};

export const KIND = { complex: 1, magnitude: 2, ringDown: 3, fitted: 4 } as const;
export type Kind = (typeof KIND)[keyof typeof KIND];

/**
 * The raw record. `data` by kind: complex re[n] im[n], magnitude m[n], each with f[n] first when the grid is uneven
 * (startHz absent); ring-down volts[n] with startHz = sampleHz and stopHz = startS; fitted f0Hz q f0StdHz qStd amplitudeV,
 * NaN where not given.
 */
export type SweepRecord = { kind: Kind; startHz?: number; stopHz?: number; points: number; data: Float64Array };
