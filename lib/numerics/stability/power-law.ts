/** Exponent α of a power-law spectrum S_y(f) ∝ f^α. */
export type Alpha = 2 | 1 | 0 | -1 | -2 | -3 | -4;

export type NoiseType =
  | "white PM"
  | "flicker PM"
  | "white FM"
  | "flicker FM"
  | "random walk FM"
  | "flicker walk FM"
  | "random run FM";

/** Names of the noise types as in IEEE Std 1139; the last two only the Hadamard statistics can hold. */
export const noiseNames: Readonly<Record<Alpha, NoiseType>> = {
  [2]: "white PM",
  [1]: "flicker PM",
  [0]: "white FM",
  [-1]: "flicker FM",
  [-2]: "random walk FM",
  [-3]: "flicker walk FM",
  [-4]: "random run FM",
};
