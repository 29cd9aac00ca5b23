/** Next.js calls it as a server starts: one whose environment is not usable says so at once, instead of at the first request. A build needs none. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME !== "nodejs" || process.env.NEXT_PHASE === "phase-production-build") return;
  const { env } = await import("@/lib/env");
  env();
}
