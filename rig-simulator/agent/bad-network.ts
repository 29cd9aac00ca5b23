import type { Sleep } from "../clock";
import type { Rig } from "../rig";
import { keyOf, uniform } from "../physics/random";
import { processes } from "../physics/processes";
import { NoAnswer, type Request, type Transport } from "./transport";

/**
 * A network with the scenario's faults: requests that do not arrive, answers that get lost, requests that arrive late, twice, or again
 * after a later one; and hours without any. Which request suffers depends on its number and the seed.
 */
export function badNetwork(inner: Transport, rig: Rig, sleep: Sleep): Transport {
  const { network } = rig.scenario.faults;
  let count = 0;
  let straggler: Request | undefined;
  const offline = offlineHours(rig);

  return async (request) => {
    if (offline()) throw new NoAnswer("no network");
    if (!network) return inner(request);

    const number = count++;
    const happens = (fault: number, chance: number): boolean =>
      chance > 0 && uniform(keyOf(rig.seed, processes.network, number, fault)) < chance;

    if (happens(1, network.dropRequest)) throw new NoAnswer("request lost");
    if (happens(2, network.delay)) await sleep(network.delayMs, request.signal);
    const late = straggler;
    straggler = undefined;
    const answer = await inner(request);
    if (late) await inner({ ...late, signal: undefined }).catch(() => undefined);
    if (isRepeatable(request) && happens(3, network.reorder)) straggler = request;
    if (isRepeatable(request) && happens(4, network.duplicate)) return inner(request);
    if (happens(5, network.dropAnswer)) throw new NoAnswer("answer lost");
    return answer;
  };
}

/** A second hello would end the session, a second `next` waits for a step that may not come. */
const isRepeatable = ({ path }: Request): boolean => !path.endsWith("/hello") && !path.endsWith("/next");

/** Whether the rig is cut off now. A fast clock that has stopped has nothing left to measure: its network is back. */
function offlineHours(rig: Rig): () => boolean {
  const startMs = rig.clock.nowMs();
  let lastMs = Number.NaN;
  let backAgain = 0;
  return () => {
    const nowMs = rig.clock.nowMs();
    const hours = (nowMs - startMs) / 3_600_000;
    const current = rig.scenario.faults.offline.findIndex(({ fromHours, hours: length }) => hours >= fromHours && hours < fromHours + length);
    const stopped = rig.isFast && nowMs === lastMs;
    lastMs = nowMs;
    if (current >= 0 && stopped) backAgain = current + 1;
    return current >= 0 && backAgain !== current + 1;
  };
}
