import type { Item } from "@/lib/imports/assemble";
import { PLACE } from "@/lib/imports/row-reader";
import type { RowKeys } from "@/lib/imports/split-phases";

/** A column of numbers that grows. */
class Growing {
  private values = new Float64Array(4096);
  n = 0;

  push(value: number): void {
    if (this.n === this.values.length) {
      const grown = new Float64Array(2 * this.n);
      grown.set(this.values);
      this.values = grown;
    }
    this.values[this.n++] = value;
  }

  all(): Float64Array {
    return this.values.slice(0, this.n);
  }
}

/** What decides to which phase a reading belongs, of all readings of a file: 28 bytes each. */
export class Keys {
  private readonly at = new Growing();
  private readonly medium = new Growing();
  private readonly cycle = new Growing();
  private readonly setPointC = new Growing();
  private readonly numberOf = new Map<string, number>();

  add({ at, medium, numbers }: Item): void {
    const known = this.numberOf.get(medium) ?? this.numberOf.size;
    this.numberOf.set(medium, known);
    this.at.push(at);
    this.medium.push(known);
    this.cycle.push(numbers[PLACE.cycle]);
    this.setPointC.push(numbers[PLACE.setPointC]);
  }

  get n(): number {
    return this.at.n;
  }

  /** Media by their number. */
  get media(): string[] {
    return [...this.numberOf.keys()];
  }

  columns(): RowKeys {
    const cycle = this.cycle.all();
    const setPointC = this.setPointC.all();
    return {
      at: this.at.all(),
      medium: Int32Array.from(this.medium.all()),
      ...(Number.isNaN(cycle[0]) ? {} : { cycle: Int32Array.from(cycle) }),
      ...(setPointC.every(Number.isNaN) ? {} : { setPointC }),
    };
  }
}
