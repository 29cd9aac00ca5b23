import { fitComplexSweep } from "@/lib/numerics/resonance/fit-complex";
import { failedFit } from "@/lib/numerics/resonance/failed-fit";
import type { FitOptions, ResonanceFit, Sweep } from "@/lib/numerics/resonance/types";

/** placeholder doc */
export function fitResonance(sweep: Sweep, options: FitOptions): ResonanceFit {
  if (sweep.kind === "complex") return fitComplexSweep(sweep, options);
  return failedFit(0);
}
