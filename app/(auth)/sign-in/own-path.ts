/** Where to go after sign-in: a path of our own, never another site's address. */
export function ownPath(next: string | string[] | undefined): string {
  if (typeof next !== "string" || !/^\/(?![/\\])/.test(next)) return "/";
  const url = new URL(next, "http://own.invalid");
  return url.origin === "http://own.invalid" && !url.pathname.startsWith("/sign-in") ? url.pathname + url.search : "/";
}
