import { Head } from "@/components/ui/page";
import { WordTag } from "@/components/ui/tag";
import type { SweepAnswer } from "@/lib/readings/schema";
import { flagWords, wellWords } from "./flag-words";

/** The flags of a repeat as sentences, what is well, and how flags count. */
export function Flags({ sweep: { flags, judged, snr } }: { sweep: SweepAnswer }) {
  const well = wellWords(flags, judged);
  return (
    <div>
      <Head>Flags</Head>
      <dl className="flags">
        {flagWords(flags, judged, snr).map(({ flag, head, rest }) => (
          <div key={flag}>
            <dt><WordTag>{flag}</WordTag></dt>
            <dd><b>{head}</b>: {rest}</dd>
          </div>
        ))}
        {well && (
          <div>
            <dt className="text-ink2">{flags.length > 0 ? "not set" : "none"}</dt>
            <dd className="text-ink2">{well}</dd>
          </div>
        )}
        <div>
          <dt className="text-ink3">judged by</dt>
          <dd className="text-ink3">failed, edge, bent: left out of the phase value. narrow, sparse, noisy, distorted, rushed, clock: count, and are noted. late: never counts.</dd>
        </div>
      </dl>
    </div>
  );
}
