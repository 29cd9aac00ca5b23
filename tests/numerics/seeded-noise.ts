import { xoroshiro128plus } from "pure-rand/generator/XoroShiro";

/** Standard normal values, the same for the same seed. Source: Box and Muller (1958). */
export function gaussian(seed: number): () => number {
  const generator = xoroshiro128plus(seed);
  const uniform = () => ((generator.unsafeNext() >>> 0) + 0.5) / 2 ** 32;
  let spare: number | undefined;
  return () => {
    if (spare !== undefined) {
      const value = spare;
      spare = undefined;
      return value;
    }
    const radius = Math.sqrt(-2 * Math.log(uniform()));
    const angle = 2 * Math.PI * uniform();
    spare = radius * Math.sin(angle);
    return radius * Math.cos(angle);
  };
}
