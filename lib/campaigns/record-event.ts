import type { Transaction } from "sequelize";
import { change } from "@/lib/db";

type Event = {
  campaignId: string;
  now: Date;
  kind: string;
  who: string;
  text: string;
  sequence?: number;
  readingIndex?: number;
};

/** A line in the campaign's log, at server time and rig time. */
export async function recordEvent(transaction: Transaction, { campaignId, now, kind, who, text, sequence, readingIndex }: Event): Promise<void> {
  await change(
    `insert into campaign_event (campaign_id, at, clock, kind, who, text, sequence, reading_index)
     select c.id, $2, case when rig.clock = 'simulated' then rig.reported_clock else $2 end, $3, $4, $5, $6, $7
       from campaign c left join rig on rig.id = c.rig_id where c.id = $1`,
    [campaignId, now, kind, who, text, sequence ?? null, readingIndex ?? null],
    transaction,
  );
}
