import { impossible } from "@/lib/errors";
import type { RowError } from "@/lib/imports/row-reader";
import type { ImportProblem } from "@/models/json";

/** As many as anybody reads; the rest is counted. */
const MOST_TOLD = 50;

/** A file that cannot be imported, and why. Nothing of it is. */
export class Refusal extends Error {
  constructor(readonly problem: ImportProblem) {
    super(problem.detail);
    this.name = "Refusal";
  }
}

export const refuse = (detail: string, errors: ImportProblem["errors"] = [], errorCount = errors.length): Refusal => new Refusal({ detail: `${detail} Nothing was imported.`, errors, errorCount });

/** Collects what is wrong with rows, up to what anybody reads. */
export class RowErrors {
  readonly told: ImportProblem["errors"] = [];
  count = 0;

  add({ line, column, message }: RowError): void {
    this.count++;
    if (this.told.length < MOST_TOLD) this.told.push({ path: `line ${line}${column ? `, ${column}` : ""}`, message });
  }

  /** @throws Refusal when there are any. */
  demandNone(): void {
    if (this.count === 0) return;
    const [{ path, message }] = this.told;
    const others = this.count - 1;
    throw refuse(`${path}: ${message}${others > 0 ? `; and ${others} more` : ""}.`, this.told, this.count);
  }
}

export const asAppError = ({ detail, errors, errorCount }: ImportProblem) => impossible(detail, { errors, errorCount });
