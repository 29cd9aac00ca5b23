import Link from "next/link";
import { LinkButton } from "@/components/ui/button";
import { formatVolume } from "@/lib/format";
import { formatDurationInWords } from "@/lib/format-time";
import { sentence } from "@/lib/protocol/describe";
import { checkedDefinition } from "@/lib/protocols/checked-definition";
import { PROTOCOL_EXAMPLES } from "@/lib/protocols/examples";
import { usualEstimate } from "@/lib/protocols/plan";

/** Examples to copy, each with what it is for, and the empty sheet. */
export function Beginnings({ now, zone }: { now: Date; zone: string }) {
  return (
    <ul className="facts max-w-[52em]">
      {PROTOCOL_EXAMPLES.map(({ id, purpose, definition: given }) => {
        const definition = checkedDefinition(given);
        const { seconds, wasteMl } = usualEstimate(`example ${id}`, definition, { now, timeZone: zone });
        const href = `/protocols/new?from=${id}`;
        return (
          <li key={id} className="grid grid-cols-[minmax(0,1fr)_auto] items-start gap-x-6 phone:grid-cols-1 phone:gap-y-2">
            <div>
              <Link href={href} className="text-t4 font-semibold">{definition.name}</Link>
              <p>{purpose}</p>
              <p className="caption">
                {formatDurationInWords(seconds.likely)}, {formatVolume(wasteMl)} of waste. {definition.blocks.slice(0, 2).map(sentence).join(" ")}
              </p>
            </div>
            <LinkButton href={href}>Begin from it</LinkButton>
          </li>
        );
      })}
      <li className="grid grid-cols-[minmax(0,1fr)_auto] items-start gap-x-6 phone:grid-cols-1 phone:gap-y-2">
        <div>
          <Link href="/protocols/new?from=nothing" className="text-t4 font-semibold">An empty sheet</Link>
          <p>No step, no limit.</p>
        </div>
        <LinkButton href="/protocols/new?from=nothing">Begin empty</LinkButton>
      </li>
    </ul>
  );
}
