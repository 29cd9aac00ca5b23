import { rows } from "@/lib/db";
import { fitStep } from "@/lib/readings/fit-step";

/** Steps in hand, or closed within the last day, that have more readings than fits: their notification was lost with a process. */
export async function fitLeftovers({ now }: { now: Date }): Promise<void> {
  const steps = await rows<{ id: string }>(
    `select s.id from step s join fit_run r on r.campaign_id = s.campaign_id and r.current
      where s.kind = 'measure' and s.origin = 'protocol' and s.stored > 0 and (s.state in ('ready', 'out') or s.closed_at > now() - interval '1 day')
        and s.stored > (select count(*) from fit f where f.fit_run_id = r.id and f.step_id = s.id)
      limit 100`,
  );
  for (const { id } of steps) await fitStep({ stepId: id, now });
}
