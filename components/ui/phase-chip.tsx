import type { Tint } from "@/components/strip/tint";

type PhaseChipProps =
  | { kind: "air" | "fill" | "clean" | "dry"; letter?: string; tint?: undefined }
  | { kind: "liquid"; letter: string; tint: Tint };

const LETTERS = { air: "A", fill: "F", clean: "C", dry: "D" } as const;

/** The letter and texture of a phase, as in the run strip. Always beside the word. */
export function PhaseChip({ kind, letter, tint }: PhaseChipProps) {
  return (
    <i aria-hidden="true" className={`phase-chip ${kind === "liquid" ? `liquid-${tint}` : kind}`}>
      {kind === "liquid" ? letter : (letter ?? LETTERS[kind])}
    </i>
  );
}

/** Clean and dry with their textures, for legends of strips. */
export function TextureChip({ kind }: { kind: "clean" | "dry" | "held" }) {
  return (
    <svg width="18" height="18" aria-hidden="true">
      {kind === "clean" && <rect x=".5" y="4.5" width="17" height="13" fill="url(#texture-clean)" stroke="var(--clean)" />}
      {kind === "dry" && <path d="M.5 4L17.5 17.5H.5Z" fill="url(#texture-dry)" stroke="var(--dry)" />}
      {kind === "held" && <rect x=".5" y="4.5" width="17" height="13" fill="url(#texture-hatch)" />}
    </svg>
  );
}
