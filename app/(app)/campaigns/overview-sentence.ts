import type { OverviewAnswer } from "@/lib/campaigns/overview-schema";
import { capitalised, inWords, listOf, plural } from "@/lib/format";

/** `Three campaigns measure, one is halted, five wait in line.` What is not there is not named. */
export function overviewSentence({ measuring, halted, waiting, paused, queued }: OverviewAnswer["words"]): string {
  const parts = [
    { n: measuring, says: plural(measuring, "measures", "measure") },
    { n: halted, says: plural(halted, "is halted", "are halted") },
    { n: waiting, says: plural(waiting, "waits for a task", "wait for a task") },
    { n: paused, says: plural(paused, "is paused", "are paused") },
    { n: queued, says: plural(queued, "waits in line", "wait in line") },
  ].filter(({ n }) => n > 0);
  if (parts.length === 0) return "No campaign is under way.";
  const said = parts.map(({ n, says }, i) => (i === 0 ? `${inWords(n)} ${plural(n, "campaign")} ${says}` : `${inWords(n)} ${says}`));
  return `${capitalised(listOf(said))}.`;
}
