import type { Transaction } from "sequelize";
import { BinaryRows, copyRows } from "@/lib/imports/binary-copy";
import type { Item } from "@/lib/imports/assemble";
import { PLACE } from "@/lib/imports/row-reader";
import { flagBits } from "@/lib/numerics/resonance/flags";
import type { Readout } from "@/lib/numerics/resonance/types";
import { emptyColumns, type PhaseColumns } from "@/lib/phases/columns";
import { contentHash } from "@/lib/readings/content-hash";
import { fitRecord } from "@/lib/readings/fit-record";
import { SETTINGS } from "@/lib/imports/write-campaign";

const BATCH = 5000;
const BATCH_BYTES = 8 * 1024 * 1024;

/** Where a reading of the file goes: the phase by its place, and the repeat in it. */
export type Place = { phase: number; idx: number };

type Options = { fitRunId: string; stepIds: readonly string[]; repeats: readonly number[]; readout: Readout; now: Date };

/**
 * Fits readings and writes them with their raw records and fits, as many at once as were added before `write`; keeps the columns that
 * their phases are closed with.
 */
export class ReadingsWriter {
  private readonly stepIds: readonly bigint[];
  private readonly fitRunId: bigint;
  private readonly nowMs: number;
  private batch = emptyBatch();
  private pending = 0;
  private count = 0;
  readonly columns: PhaseColumns[];
  readonly pressures: { sum: number; n: number }[];

  constructor(
    private readonly transaction: Transaction,
    private readonly options: Options,
  ) {
    this.stepIds = options.stepIds.map(BigInt);
    this.fitRunId = BigInt(options.fitRunId);
    this.nowMs = options.now.getTime();
    this.columns = options.repeats.map(emptyColumns);
    this.pressures = options.repeats.map(() => ({ sum: 0, n: 0 }));
  }

  add({ at, numbers, record }: Item, { phase, idx }: Place): void {
    const stepId = this.stepIds[phase];
    const data = Buffer.from(record.data.buffer, record.data.byteOffset, record.data.byteLength);
    const [temperatureC, pressurePa, humidityPercent] = [numbers[PLACE.temperatureC], numbers[PLACE.pressurePa], numbers[PLACE.humidityPercent]];
    const given = (value: number) => (Number.isNaN(value) ? undefined : value);
    const hash = contentHash({ index: idx, takenAt: new Date(at), temperatureC: given(temperatureC), pressurePa: given(pressurePa), humidityPercent: given(humidityPercent), record });
    const fit = fitRecord(
      { kind: record.kind, startHz: record.startHz ?? null, stopHz: record.stopHz ?? null, points: record.points, data },
      { settings: SETTINGS, readout: this.options.readout, asked: null },
    );
    const flags = flagBits(fit.flags);

    const { readings, sweeps, fits } = this.batch;
    readings.row(10).bigint(stepId).integer(idx).instant(at).instant(at).instant(this.nowMs).double(temperatureC).double(pressurePa).double(humidityPercent).smallint(record.kind).blob(hash);
    sweeps.row(6).bigint(stepId).integer(idx).double(record.startHz ?? NaN).double(record.stopHz ?? NaN).integer(record.points).blob(data);
    fits.row(11).bigint(this.fitRunId).bigint(stepId).integer(idx).double(fit.f0Hz).double(fit.q).double(fit.f0StdHz).double(fit.qStd).double(fit.covarianceF0Q).double(fit.amplitude).double(fit.noise).smallint(flags);
    this.pending++;
    this.count++;

    const columns = this.columns[phase];
    columns.idx[idx] = idx;
    columns.at[idx] = at;
    columns.f0Hz[idx] = fit.f0Hz;
    columns.q[idx] = fit.q;
    columns.f0StdHz[idx] = fit.f0StdHz;
    columns.temperatureC[idx] = temperatureC;
    columns.flags[idx] = flags;
    if (!Number.isNaN(pressurePa)) {
      this.pressures[phase].sum += pressurePa;
      this.pressures[phase].n++;
    }
  }

  /** Whether so much waits that it is time to write. */
  get isFull(): boolean {
    return this.pending >= BATCH || this.batch.sweeps.length >= BATCH_BYTES;
  }

  /** How many were added. */
  get added(): number {
    return this.count;
  }

  async write(): Promise<void> {
    if (this.pending === 0) return;
    const { readings, sweeps, fits } = this.batch;
    this.batch = emptyBatch();
    this.pending = 0;
    await copyRows(this.transaction, "reading", "step_id, idx, taken_at, at, received_at, temperature_c, pressure_pa, humidity_percent, kind, content_hash", readings);
    await copyRows(this.transaction, "sweep", "step_id, idx, start_hz, stop_hz, points, data", sweeps);
    await copyRows(this.transaction, "fit", "fit_run_id, step_id, idx, f0_hz, q, f0_std_hz, q_std, f0_q_covariance, amplitude_v, noise_v, flags", fits);
  }
}

const emptyBatch = () => ({ readings: new BinaryRows(), sweeps: new BinaryRows(), fits: new BinaryRows() });
