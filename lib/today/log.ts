import { rows } from "@/lib/db";
import { whatOf } from "@/lib/alarms/words";
import { asSentence } from "@/lib/format";
import type { TodayAnswer } from "@/lib/today/schema";

const MOST = 12;

/** Of campaigns what changed their course; of alarms what no campaign's log has, and who saw to them. A simulated rig's past is past here too. */
export async function readLog({ since }: { since: Date }): Promise<TodayAnswer["log"]["items"]> {
  const found = await rows<{ at: Date; rig: string; who: string; kind: string; text: string; campaignId: string | null }>(
    `select * from (
       select case when rig.clock = 'simulated' then coalesce(e.clock, e.at) else e.at end as at, coalesce(rig.name, c.name) as rig, e.who, e.kind, e.text,
              c.id as "campaignId"
         from campaign_event e join campaign c on c.id = e.campaign_id left join rig on rig.id = c.rig_id
        where e.at >= $1 and e.kind <> 'queue' and (rig.clock is distinct from 'simulated' or coalesce(e.clock, e.at) >= $1)
       union all
       select e.at, rig.name, e.who, 'alarm ' || e.kind, e.text, a.campaign_id
         from alarm_event e join alarm a on a.id = e.alarm_id join rig on rig.id = a.rig_id
        where e.at >= $1 and (rig.clock = 'real' or coalesce(a.opened_clock, a.opened_at) >= $1) and (e.kind in ('acknowledged', 'returned', 'cleared') or (e.kind = 'opened' and (a.campaign_id is null or a.kind = 'silence')))
     ) happened order by at desc limit $2`,
    [since, MOST],
  );
  return found.map(({ at, rig, who, kind, text, campaignId }) => ({ at: at.toISOString(), rig, text: sentenceOf(who, kind, text), campaignId }));
}

function sentenceOf(who: string, kind: string, text: string): string {
  const told = kind === "alarm opened" ? whatOf({ kind, text }) : text;
  const said = asSentence(told);
  const by = who !== "Longreed" && !said.includes(who) ? `, ${who}` : "";
  return `${said.replace(/\.$/, "")}${by}.`;
}
