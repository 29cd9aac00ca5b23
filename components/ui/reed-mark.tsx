/** The sign of Longreed: one reed, at rest and at the ends of its swing. */
export function ReedMark() {
  return (
    <svg width="26" height="22" viewBox="0 0 26 22" fill="none" stroke="currentColor" aria-hidden="true">
      <path d="M2 3v16" strokeWidth="4" />
      <path d="M4 11C11 11 18 7 24 2" strokeWidth="1.1" opacity=".55" />
      <path d="M4 11C11 11 18 15 24 20" strokeWidth="1.1" opacity=".55" />
      <path d="M4 11H25" strokeWidth="2" />
    </svg>
  );
}
