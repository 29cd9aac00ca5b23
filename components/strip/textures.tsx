/** Textures that carry phases, once a page: strips, bottles, bars and plots refer to them by id. */
export function Textures() {
  return (
    <svg width="0" height="0" className="absolute" aria-hidden="true">
      <defs>
        <pattern id="texture-clean" width="5" height="5" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <rect width="5" height="5" fill="var(--clean-bg)" />
          <rect width="2.2" height="5" fill="var(--clean)" />
        </pattern>
        <pattern id="texture-dry" width="4" height="4" patternUnits="userSpaceOnUse">
          <rect width="4" height="4" fill="var(--dry-bg)" />
          <circle cx="1" cy="1" r="1" fill="var(--dry)" />
          <circle cx="3" cy="3" r="1" fill="var(--dry)" />
        </pattern>
        <pattern id="texture-liquid-2" width="6" height="6" patternUnits="userSpaceOnUse">
          <rect width="6" height="6" fill="var(--liq2)" />
          <rect y="5" width="6" height="1" fill="#fff" opacity=".26" />
        </pattern>
        <pattern id="texture-liquid-3" width="6" height="4" patternUnits="userSpaceOnUse">
          <rect width="6" height="4" fill="var(--liq3)" />
          <rect y="3" width="6" height="1" fill="#fff" opacity=".3" />
        </pattern>
        <pattern id="texture-hatch" width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(-45)">
          <rect width="1" height="6" fill="var(--rule2)" />
        </pattern>
      </defs>
    </svg>
  );
}
