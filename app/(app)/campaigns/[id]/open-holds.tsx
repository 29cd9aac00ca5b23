import { StateMark } from "@/components/ui/state-mark";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { stateWord } from "@/lib/campaigns/state-word";
import { formatRecent } from "@/lib/format-time";
import { HOLD_WORDS } from "./hold-words";

/** What holds the campaign now, each with its reason in words. */
export function OpenHolds({ campaign: { holds, timeZone, now, parking } }: { campaign: CampaignAnswer }) {
  const open = holds.filter(({ releasedAt }) => !releasedAt);
  if (open.length === 0) return null;
  return (
    <ul className="mt-4 grid gap-2 border-t border-rule2 pt-3" aria-label="What holds it">
      {open.map(({ id, reason, text, since, by }) => (
        <li key={id} className="flex flex-wrap items-baseline gap-x-3">
          <StateMark state={stateWord("held", [reason])}>{HOLD_WORDS[reason]}</StateMark>
          <span>{text}</span>
          <span className="small text-ink2">{by ? `${by}, ` : ""}since {formatRecent(since, timeZone, now).replace("Today ", "")}</span>
        </li>
      ))}
      {parking === "running" && <li className="small text-ink2">The cell is being parked.</li>}
    </ul>
  );
}
