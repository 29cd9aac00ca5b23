import { DataTable, type TableColumn } from "@/components/ui/data-table";
import { Section } from "@/components/ui/page";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { asSentence, NO_VALUE } from "@/lib/format";
import { formatDayTime, formatDuration } from "@/lib/format-time";
import { HOLD_WORDS, type HoldAnswer } from "./hold-words";

type Row = { hold: HoldAnswer; zone: string; now: string };

const HOLDS: readonly TableColumn<Row>[] = [
  { id: "since", head: "Since", slot: "c", width: 150, cell: ({ hold, zone, now }) => <span className="num">{formatDayTime(hold.since, zone, now)}</span> },
  { id: "long", head: "How long", slot: "b", align: "right", width: 110, cell: ({ hold, now }) => howLong(hold, now) },
  { id: "reason", head: "Why", slot: "a", width: 190, cell: ({ hold }) => HOLD_WORDS[hold.reason] },
  { id: "text", head: "In words", slot: "w", cell: ({ hold }) => <span className="whitespace-normal">{asSentence(hold.text)}</span> },
  { id: "by", head: "By", slot: "d", width: 130, cell: ({ hold }) => hold.by ?? "Longreed" },
];

/** By the rig's clock; a simulated one may stand still while its campaign is held. */
function howLong({ since, until, releasedAt }: HoldAnswer, now: string): string {
  const seconds = (Date.parse(releasedAt ? (until ?? releasedAt) : now) - Date.parse(since)) / 1000;
  const said = seconds < 1 ? NO_VALUE : formatDuration(seconds);
  return releasedAt ? said : `${said}, open`;
}

type Amendment = CampaignAnswer["amendments"][number];
type AmendmentRow = { amendment: Amendment; zone: string; now: string };

const VERSIONS: readonly TableColumn<AmendmentRow>[] = [
  { id: "at", head: "When", slot: "c", width: 150, cell: ({ amendment, zone, now }) => <span className="num">{formatDayTime(amendment.at, zone, now)}</span> },
  { id: "versions", head: "Version", slot: "a", width: 190, cell: ({ amendment }) => `${amendment.fromVersion} to ${amendment.toVersion}, from step ${amendment.fromSequence} on` },
  { id: "why", head: "Why", slot: "w", cell: ({ amendment }) => <span className="whitespace-normal">{amendment.why}</span> },
  { id: "by", head: "By", slot: "d", width: 130, cell: ({ amendment }) => amendment.by },
];

/** Every hold with its reason, and every move to another version of the protocol. */
export function HoldsAndVersions({ campaign: { holds, amendments, timeZone: zone, now } }: { campaign: CampaignAnswer }) {
  return (
    <Section head={amendments.length > 0 ? "Holds and versions" : "Holds"} note="Held time is hatched in the run.">
      {holds.length > 0 && <DataTable label="Holds" columns={HOLDS} rows={holds.map((hold) => ({ hold, zone, now }))} rowKey={({ hold }) => hold.id} />}
      {amendments.length > 0 && (
        <div className="mt-4">
          <DataTable label="Moves to another version" columns={VERSIONS} rows={amendments.map((amendment) => ({ amendment, zone, now }))} rowKey={({ amendment }) => amendment.at} />
        </div>
      )}
    </Section>
  );
}
