import type { Transaction } from "sequelize";
import type { Item } from "@/lib/imports/assemble";
import { BinaryRows, copyRows } from "@/lib/imports/binary-copy";
import { PLACE } from "@/lib/imports/row-reader";
import { SETTINGS } from "@/lib/imports/write-campaign";
import { flagBits } from "@/lib/numerics/resonance/flags";
import type { Readout } from "@/lib/numerics/resonance/types";
import { emptyColumns, type PhaseColumns } from "@/lib/phases/columns";
import { contentHash } from "@/lib/readings/content-hash";
import { fitRecord } from "@/lib/readings/fit-record";
import { KIND, type SweepRecord } from "@/lib/readings/reading";

const BATCH = 5000;
const BATCH_BYTES = 8 * 1024 * 1024;

/** Where a reading of the file goes: the phase by its place, and the repeat in it. */
export type Place = { phase: number; idx: number };

type Options = { fitRunId: string; stepIds: readonly string[]; repeats: readonly number[]; readout: Readout; now: Date };

const READING = "step_id, idx, taken_at, at, received_at, temperature_c, pressure_pa, humidity_percent, kind, content_hash";
const SWEEP = "step_id, idx, start_hz, stop_hz, points, data";
const FIT = "fit_run_id, step_id, idx, f0_hz, q, f0_std_hz, q_std, f0_q_covariance, amplitude_v, noise_v, flags";

/**
 * Fits readings and writes them with their raw records and fits; keeps the columns that their phases are closed with. While the
 * database takes one batch, the next is read.
 */
export class ReadingsWriter {
  private readonly stepIds: readonly number[];
  private readonly fitRunId: number;
  private readonly nowMs: number;
  private batch = emptyBatch();
  private spare = emptyBatch();
  private writing: Promise<void> = Promise.resolve();
  private pending = 0;
  private count = 0;
  readonly columns: PhaseColumns[];
  readonly pressures: { sum: number; n: number }[];

  constructor(
    private readonly transaction: Transaction,
    private readonly options: Options,
  ) {
    this.stepIds = options.stepIds.map(Number);
    this.fitRunId = Number(options.fitRunId);
    this.nowMs = options.now.getTime();
    this.columns = options.repeats.map(emptyColumns);
    this.pressures = options.repeats.map(() => ({ sum: 0, n: 0 }));
  }

  add({ at, numbers, record: sweep }: Item, { phase, idx }: Place): void {
    const stepId = this.stepIds[phase];
    const record = sweep ? sweep() : valuesRecord(numbers);
    const [temperatureC, pressurePa, humidityPercent] = [numbers[PLACE.temperatureC], numbers[PLACE.pressurePa], numbers[PLACE.humidityPercent]];
    const data = new Uint8Array(record.data.buffer, record.data.byteOffset, record.data.byteLength);
    const { f0Hz, q, f0StdHz, qStd, covarianceF0Q, amplitude, noise, flags } = this.fit(record);
    const bits = flags.length > 0 ? flagBits(flags) : 0;

    const { readings, sweeps, fits } = this.batch;
    readings.row(10).bigint(stepId).integer(idx).instant(at).instant(at).instant(this.nowMs).double(temperatureC).double(pressurePa).double(humidityPercent).smallint(record.kind);
    readings.blob(contentHash({ index: idx, takenAt: new Date(at), temperatureC, pressurePa, humidityPercent, record }));
    sweeps.row(6).bigint(stepId).integer(idx).double(record.startHz ?? NaN).double(record.stopHz ?? NaN).integer(record.points).blob(data);
    fits.row(11).bigint(this.fitRunId).bigint(stepId).integer(idx).double(f0Hz).double(q).double(f0StdHz).double(qStd).double(covarianceF0Q).double(amplitude).double(noise).smallint(bits);
    this.pending++;
    this.count++;

    const columns = this.columns[phase];
    columns.idx[idx] = idx;
    columns.at[idx] = at;
    columns.f0Hz[idx] = f0Hz;
    columns.q[idx] = q;
    columns.f0StdHz[idx] = f0StdHz;
    columns.temperatureC[idx] = temperatureC;
    columns.flags[idx] = bits;
    if (!Number.isNaN(pressurePa)) {
      this.pressures[phase].sum += pressurePa;
      this.pressures[phase].n++;
    }
  }

  private fit(record: SweepRecord) {
    const { kind, startHz = null, stopHz = null, points, data } = record;
    return fitRecord({ kind, startHz, stopHz, points, data: Buffer.from(data.buffer, data.byteOffset, data.byteLength) }, { settings: SETTINGS, readout: this.options.readout, asked: null });
  }

  /** Whether so much waits that it is time to write. */
  get isFull(): boolean {
    return this.pending >= BATCH || this.batch.sweeps.length >= BATCH_BYTES;
  }

  /** How many were added. */
  get added(): number {
    return this.count;
  }

  /** Hands the batch to the database once that has taken the one before. */
  async write(): Promise<void> {
    await this.writing;
    const { batch } = this;
    this.batch = this.spare;
    this.spare = batch;
    for (const rows of Object.values(this.batch)) rows.clear();
    this.pending = 0;
    this.writing = this.copy(batch);
    // Whoever waits next is told; until then nobody does.
    this.writing.catch(() => undefined);
  }

  /** Writes what is left. */
  async end(): Promise<void> {
    await this.write();
    await this.writing;
  }

  private async copy({ readings, sweeps, fits }: Batch): Promise<void> {
    await copyRows(this.transaction, "reading", READING, readings);
    await copyRows(this.transaction, "sweep", SWEEP, sweeps);
    await copyRows(this.transaction, "fit", FIT, fits);
  }
}

type Batch = ReturnType<typeof emptyBatch>;

const emptyBatch = () => ({ readings: new BinaryRows(), sweeps: new BinaryRows(), fits: new BinaryRows() });

const valuesRecord = (numbers: readonly number[]): SweepRecord => ({
  kind: KIND.fitted,
  points: 1,
  data: Float64Array.of(numbers[PLACE.f0Hz], numbers[PLACE.q], numbers[PLACE.f0StdHz], numbers[PLACE.qStd], numbers[PLACE.amplitudeV]),
});
