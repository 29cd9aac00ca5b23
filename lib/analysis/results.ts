import { createHash } from "node:crypto";
import { codeDigest } from "@/lib/analysis/code-digest";
import { change, row, rows } from "@/lib/db";

const DAY_MS = 86_400_000;
/** Questions nobody has asked for so long are forgotten, and kept up to date until then. */
const KEPT_DAYS = 14;
/** Questions kept of one campaign, the last asked first: a script that tries every confidence level must not fill the disk. */
const MOST_A_CAMPAIGN = 200;

export type Question = { kind: "stability" | "drift" | "airReturn"; query: object };

type Ask<Answer> = {
  campaignId: string;
  question: Question;
  fitRunId: string;
  /** SHA-256 of the phases that the answer is made from. */
  content: Buffer;
  /** The same looked up again: what changed while the answer was computed must not be kept under the name of what was before. */
  contentNow: () => Promise<Buffer | null>;
  /** Asked on behalf of nobody: the question grows no younger. */
  background?: boolean;
  compute: () => Promise<Answer>;
};

const underWay = new Map<string, Promise<unknown>>();

/**
 * The answer to a question about closed phases: the stored one if it was made from the very same phase values and repeats by
 * the very same program, else a fresh one, which takes its place. One question has one stored answer, the newest. Who asks
 * while it is being computed waits for the same computation.
 */
export async function resultOf<Answer extends object>({ campaignId, question, fitRunId, content: phases, contentNow, background = false, compute }: Ask<Answer>): Promise<Answer> {
  const code = await codeDigest();
  const asked = hash(JSON.stringify(question));
  const content = hash(fitRunId, phases, code);
  const stored = await row<{ answer: Answer | null; old: boolean }>(
    `select case when content = $3 then answer end as answer, asked_at < now() - interval '1 hour' as old from analysis_result where campaign_id = $1 and question_hash = $2`,
    [campaignId, asked, content],
  );
  if (stored?.answer) {
    if (stored.old && !background) await change(`update analysis_result set asked_at = now() where campaign_id = $1 and question_hash = $2`, [campaignId, asked]);
    return stored.answer;
  }
  return once(`${campaignId} ${asked.toString("hex")} ${content.toString("hex")}`, async () => {
    const answer = await compute();
    if (!(await contentNow())?.equals(phases)) return answer;
    await change(
      `insert into analysis_result as r (campaign_id, question_hash, question, code, content, answer, made_at, asked_at)
       values ($1, $2, $3, $4, $5, $6, now(), now())
       on conflict (campaign_id, question_hash) do update set code = excluded.code, content = excluded.content, answer = excluded.answer,
         made_at = excluded.made_at, asked_at = case when $7 then r.asked_at else excluded.asked_at end`,
      [campaignId, asked, JSON.stringify(question), code, content, JSON.stringify(answer), background],
    );
    return answer;
  });
}

const hash = (...parts: (string | Buffer)[]): Buffer => parts.reduce((sum, part) => sum.update(part), createHash("sha256")).digest();

function once<Answer>(key: string, compute: () => Promise<Answer>): Promise<Answer> {
  const running = underWay.get(key) as Promise<Answer> | undefined;
  if (running) return running;
  const started = compute().finally(() => underWay.delete(key));
  underWay.set(key, started);
  return started;
}

/** What people have asked of a campaign's analysis lately, as this version of the program understands it; the last asked first. */
export async function findQuestions(campaignId: string): Promise<Question[]> {
  const found = await rows<{ question: Question }>(
    `select question from analysis_result where campaign_id = $1 and code = $2 and asked_at > now() - interval '${KEPT_DAYS} days' order by asked_at desc limit ${MOST_A_CAMPAIGN}`,
    [campaignId, await codeDigest()],
  );
  return found.map(({ question }) => question);
}

/** Forgets the answers to what nobody has asked lately, and to more questions about one campaign than anybody looks at. */
export async function forgetOldResults({ now }: { now: Date }): Promise<void> {
  await change(`delete from analysis_result where asked_at < $1`, [new Date(now.getTime() - KEPT_DAYS * DAY_MS)]);
  await change(
    `delete from analysis_result r using (
       select campaign_id, question_hash, row_number() over (partition by campaign_id order by asked_at desc, question_hash) as place from analysis_result
     ) ranked where ranked.place > $1 and r.campaign_id = ranked.campaign_id and r.question_hash = ranked.question_hash`,
    [MOST_A_CAMPAIGN],
  );
}
