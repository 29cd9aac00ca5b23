const MOST_ERRORS = 50;
const INSTANT = /^\d{4}-\d{2}-\d{2}[Tt]\d{2}:\d{2}:\d{2}(\.\d{1,9})?([Zz]|[+-]\d{2}:\d{2})$/;

/** Collects what is wrong with a body, by path, up to a bound. Each method answers undefined for what it refuses. */
export class Checker {
  readonly errors: { path: string; message: string }[] = [];

  get full(): boolean {
    return this.errors.length >= MOST_ERRORS;
  }

  fail(path: string, message: string): undefined {
    if (!this.full) this.errors.push({ path, message });
    return undefined;
  }

  object(value: unknown, path: string): Record<string, unknown> | undefined {
    if (typeof value === "object" && value !== null && !Array.isArray(value)) return value as Record<string, unknown>;
    return this.fail(path, "must be an object");
  }

  list(value: unknown, path: string, min: number, max: number): unknown[] | undefined {
    if (!Array.isArray(value)) return this.fail(path, "must be a list");
    if (value.length < min || value.length > max) return this.fail(path, `must have ${min} to ${max} items, has ${value.length}`);
    return value;
  }

  text(value: unknown, path: string, max: number): string | undefined {
    if (typeof value !== "string" || value.length === 0 || value.length > max || value.includes("\0")) {
      return this.fail(path, `must be a text of 1 to ${max} characters`);
    }
    return value;
  }

  number(value: unknown, path: string, min: number, max: number): number | undefined {
    if (typeof value !== "number" || !Number.isFinite(value)) return this.fail(path, "must be a finite number");
    if (value < min || value > max) return this.fail(path, min === Number.MIN_VALUE ? "must be above 0" : `must lie between ${min} and ${max}`);
    return value;
  }

  optionalNumber(value: unknown, path: string, min: number, max: number): number | undefined {
    return value === undefined ? undefined : this.number(value, path, min, max);
  }

  whole(value: unknown, path: string, min: number, max: number): number | undefined {
    if (!Number.isInteger(value)) return this.fail(path, "must be a whole number");
    return this.number(value, path, min, max);
  }

  instant(value: unknown, path: string): Date | undefined {
    const at = typeof value === "string" && INSTANT.test(value) ? new Date(value) : undefined;
    if (!at || Number.isNaN(at.getTime())) return this.fail(path, "must be a time such as 2026-05-14T06:18:00Z");
    return at;
  }

  /** A list of finite numbers as a typed array; tells of the first wrong one only. */
  numbers(value: unknown, path: string, min: number, max: number): Float64Array | undefined {
    const list = this.list(value, path, min, max);
    if (!list) return undefined;
    const numbers = new Float64Array(list.length);
    for (let i = 0; i < list.length; i++) {
      const v = list[i];
      if (typeof v !== "number" || !Number.isFinite(v)) return this.fail(`${path}.${i}`, "must be a finite number");
      numbers[i] = v;
    }
    return numbers;
  }
}
