import type { Reading, ReadingsAnswer } from "../contract";
import { isPassing, Refused, type Client } from "./client";

/** The step was given out again: somebody else has it. */
export class Superseded extends Error {}

const spoolLimitBytes = 64 * 1024 * 1024;

type Options = {
  client: Client;
  stepId: string;
  lease: string;
  maxReadings: number;
  maxBodyBytes: number;
  nowMs: () => number;
  onAnswer: (answer: ReadingsAnswer) => void;
};

/**
 * The local spool of one step's readings: sends them in batches under the server's limits. Without network they stay here while measuring
 * goes on; `drain` waits until the last is stored.
 */
export class Uploader {
  private readonly spool: { index: number; json: string }[] = [];
  private bytes = 0;
  private failures = 0;
  private lastSentMs: number;
  private maxReadings: number;

  constructor(private readonly options: Options) {
    this.lastSentMs = options.nowMs();
    this.maxReadings = options.maxReadings;
  }

  get waiting(): number {
    return this.spool.length;
  }

  add(reading: Reading): void {
    const json = JSON.stringify(reading);
    this.spool.push({ index: reading.index, json });
    this.bytes += json.length + 1;
  }

  /** Whether a batch is full, or the oldest reading has waited `ms` of real time. */
  isDue(ms: number): boolean {
    if (this.spool.length === 0) return false;
    if (this.failures > 0) return this.options.nowMs() - this.lastSentMs >= Math.min(30_000, 500 * 2 ** this.failures);
    const full = this.spool.length >= this.maxReadings || this.bytes >= this.roomBytes;
    return full || this.options.nowMs() - this.lastSentMs >= ms;
  }

  /** Sends what fits into one batch; stays silent when there is no answer, unless the spool is full. */
  async send(): Promise<void> {
    try {
      await this.sendBatch();
    } catch (error) {
      if (!isPassing(error)) throw error;
      this.failures++;
      this.lastSentMs = this.options.nowMs();
      if (this.bytes > spoolLimitBytes) await this.drain();
    }
  }

  async drain(): Promise<void> {
    while (this.spool.length > 0) {
      try {
        await this.sendBatch();
      } catch (error) {
        if (!isPassing(error)) throw error;
        await this.options.client.backOff(this.failures++, error);
      }
    }
  }

  private get roomBytes(): number {
    return this.options.maxBodyBytes * 0.95 - 200;
  }

  private async sendBatch(): Promise<void> {
    let count = 0;
    for (let bytes = 0; count < this.spool.length && count < this.maxReadings; count++) {
      bytes += this.spool[count].json.length + 1;
      if (count > 0 && bytes > this.roomBytes) break;
    }
    const batch = this.spool.slice(0, count);
    let answer: ReadingsAnswer;
    try {
      answer = await this.options.client.readings(this.options.stepId, this.options.lease, batch.map(({ json }) => json));
    } catch (error) {
      if (error instanceof Refused && error.status === 413 && count > 1) {
        this.maxReadings = Math.ceil(count / 2);
        return;
      }
      throw error;
    }
    this.failures = 0;
    this.lastSentMs = this.options.nowMs();
    this.spool.splice(0, count);
    for (const { json } of batch) this.bytes -= json.length + 1;
    this.options.onAnswer(answer);
    if (answer.lease === "superseded") throw new Superseded("the step was given out again");
  }
}
