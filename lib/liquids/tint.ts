/**
 * Which of the three tints of the run strip a liquid has: darker is more viscous. The bounds part water and thin solvents,
 * liquids like 2-propanol, and oils; they are ours.
 */
export function tintOf(viscosityMPaS: number | null): 1 | 2 | 3 {
  if (viscosityMPaS === null || viscosityMPaS < 1.5) return 1;
  return viscosityMPaS < 6 ? 2 : 3;
}
