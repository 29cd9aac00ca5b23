/** What Longreed promises to rig agents in `hello`. */
export const CONTRACT = 1 as const;
export const LEASE_S = 60;
export const HEARTBEAT_S = 15;
export const WAIT_S = 25;
export const MAX_BODY_BYTES = 8 * 1024 * 1024;
export const MAX_READINGS = 500;
/** A session that was not heard for this long is not fresh: another instance may take its place. */
export const SESSION_FRESH_S = 60;

/** The agent that calls, as its token says. */
export type Agent = { rigId: string; rigName: string; tokenId: string };
