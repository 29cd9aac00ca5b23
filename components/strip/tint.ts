/** Liquids come in three tints by viscosity: 1 plain, 2 wide-ruled, 3 close-ruled. */
export type Tint = 1 | 2 | 3;

export const liquidFill = (tint: Tint): string => (tint === 1 ? "var(--liq1)" : `url(#texture-liquid-${tint})`);
export const liquidInk = (tint: Tint): string => `var(--onliq${tint})`;
export const liquidLine = (tint: Tint): string => `var(--liq${tint}-line)`;
export const HATCH = "url(#texture-hatch)";
