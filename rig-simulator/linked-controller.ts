/**
 * A controller that aborts with its parent too. `unlink` when it is no longer needed, so that a parent which lives for weeks keeps no
 * memory of each request (AbortSignal.any does in Node 20).
 */
export function linkedController(parent?: AbortSignal): { controller: AbortController; unlink: () => void } {
  const controller = new AbortController();
  const follow = (): void => controller.abort(parent?.reason);
  if (parent?.aborted) follow();
  parent?.addEventListener("abort", follow, { once: true });
  return { controller, unlink: () => parent?.removeEventListener("abort", follow) };
}
