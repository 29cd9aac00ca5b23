import { notAllowed } from "@/lib/errors";
import { env } from "@/lib/env";

/**
 * A cookie travels with requests that other sites make, an Origin of our own does not: mutations with a session cookie
 * need one. In demo mode both loopback names count, as people type either.
 *
 * @throws AppError 403
 */
export function demandOwnOrigin(request: Request): void {
  const origin = request.headers.get("origin");
  if (!origin || !ownOrigins().includes(origin)) {
    throw notAllowed(`A change with a session cookie must come from ${env().APP_URL} itself; scripts use a personal access token`);
  }
}

function ownOrigins(): string[] {
  const { APP_URL, LONGREED_DEMO } = env();
  const own = new URL(APP_URL);
  if (!LONGREED_DEMO) return [own.origin];
  const port = own.port ? `:${own.port}` : "";
  return [own.origin, `${own.protocol}//localhost${port}`, `${own.protocol}//127.0.0.1${port}`];
}
