import { Button } from "@/components/ui/button";
import { SAFETY_NOTE } from "@/lib/campaigns/cautions";
import type { CheckAnswer } from "@/lib/campaigns/draft-schema";
import { formatTime } from "@/lib/format-time";

/** By code: the words that were acknowledged, and when. Other words need another acknowledgement. */
export type Acknowledged = Readonly<Record<string, { message: string; at: string }>>;

type Caution = CheckAnswer["cautions"][number];
type CautionsProps = {
  cautions: readonly Caution[] | undefined;
  acknowledged: Acknowledged;
  personName: string;
  timeZone: string;
  onAcknowledge: (caution: Caution) => void;
};

export function Cautions({ cautions, acknowledged, personName, timeZone, onAcknowledge }: CautionsProps) {
  return (
    <>
      {cautions?.length === 0 && <p className="text-ink2">Nothing in this campaign asks for one.</p>}
      {cautions === undefined && <p className="text-ink2">They follow from the protocol and the liquids.</p>}
      {cautions?.map((caution) => {
        const given = acknowledged[caution.code];
        return (
          <article key={caution.code} className="grid grid-cols-[236px_minmax(0,1fr)_252px] gap-x-7 border-t border-rule py-3 first:border-t-0 first:pt-0 narrow:grid-cols-1 narrow:gap-y-1.5">
            <h3 className="font-semibold">{caution.title}</h3>
            <div className="grid grid-cols-2 gap-7 text-[13px] leading-[19px] phone:grid-cols-1 phone:gap-1.5">
              <div>{caution.what.map((line) => <p key={line}>{line}</p>)}</div>
              <p className="text-ink2">{caution.where}</p>
            </div>
            <div className="text-[13px] leading-[19px]">
              {given?.message === caution.message ? (
                <p><b className="block">Acknowledged by {personName}</b><span className="text-ink2">today {formatTime(given.at, timeZone)}</span></p>
              ) : (
                <Button small onClick={() => onAcknowledge(caution)}>Acknowledge as {personName}</Button>
              )}
            </div>
          </article>
        );
      })}
      <p className="say-small mt-4">{SAFETY_NOTE}</p>
    </>
  );
}
