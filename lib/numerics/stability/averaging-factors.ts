export type Taus = "octave" | "decade" | "all";

const mostFactors = 2000;

/**
 * Averaging factors m, rising, from 1 to half the longest stretch.
 *
 * @param taus `octave`: 1, 2, 4, 8 …; `decade`: 1, 2, 4, 10, 20, 40 …; `all`: every whole number, thinned evenly on a
 *   logarithmic scale to at most 2 000.
 * @param longest Number of values in the longest stretch.
 * @returns Empty when the longest stretch has fewer than two values.
 * @throws RangeError if `longest` is not a whole number ≥ 0.
 */
export function averagingFactors(taus: Taus, longest: number): number[] {
  if (!Number.isInteger(longest) || longest < 0) throw new RangeError(`longest must be a whole number ≥ 0, got ${longest}`);
  const largest = Math.floor(longest / 2);

  switch (taus) {
    case "octave":
      return multiples([1], 2, largest);
    case "decade":
      return multiples([1, 2, 4], 10, largest);
    case "all":
      return largest <= mostFactors ? Array.from({ length: largest }, (_, i) => i + 1) : thinned(largest);
  }
}

function multiples(within: readonly number[], ratio: number, largest: number): number[] {
  const factors: number[] = [];
  for (let base = 1; base <= largest; base *= ratio) {
    for (const step of within) if (step * base <= largest) factors.push(step * base);
  }
  return factors;
}

function thinned(largest: number): number[] {
  const factors = new Set<number>();
  for (let i = 0; i < mostFactors; i++) factors.add(Math.round(largest ** (i / (mostFactors - 1))));
  return [...factors];
}
