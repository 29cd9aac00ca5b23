/** A property was asked for where its source gives none. Nothing is extrapolated; the text names the range. */
export class FluidRangeError extends RangeError {
  constructor(
    readonly property: string,
    readonly quantity: string,
    readonly value: number,
    readonly range: { min: number; max: number },
  ) {
    super(`${property} is known for ${quantity} from ${range.min} to ${range.max}, not at ${value}`);
    this.name = "FluidRangeError";
  }
}

/**
 * Stops a calculation outside the range of its source.
 *
 * @param property What is asked for, e.g. "Density of water".
 * @param quantity The argument with its unit, e.g. "temperature / °C".
 * @throws FluidRangeError if the value is outside [min, max] or not a number.
 */
export function requireRange(property: string, quantity: string, value: number, min: number, max: number): void {
  if (!(value >= min && value <= max)) throw new FluidRangeError(property, quantity, value, { min, max });
}
