import { listOf } from "@/lib/format";
import { formatDay, formatTime } from "@/lib/format-time";
import { frame } from "@/lib/mail/frame";

export type TaskMail = {
  instruction: string;
  createdAt: Date;
  dueAt: Date | null;
  rig: string;
  timeZone: string;
  campaignId: string | null;
  campaign: string | null;
  /** The campaign waits for it now. */
  holds: boolean;
  laboratory: string;
  recipients: readonly string[];
  appUrl: string;
};

/** A task that cannot wait: what, where, by when, and what waits for it. */
export function renderTaskMail(task: TaskMail): { subject: string; text: string; html: string } {
  const { instruction, rig, campaign, campaignId, holds, appUrl, laboratory, timeZone } = task;
  const what = instruction.split(/(?<=[.:])\s/, 1)[0].replace(/[.:]$/, "");
  const subject = `${rig}${holds ? " waits" : ""}: ${what.charAt(0).toLowerCase()}${what.slice(1)}`.replaceAll(/[\r\n]+/g, " ").slice(0, 120);
  const when = (at: Date) => `${formatDay(at, timeZone, task.createdAt)} ${formatTime(at, timeZone)}`;
  const facts: [string, string][] = [
    ["Rig", rig],
    ...(campaign ? ([["Campaign", `C-${campaignId}, ${campaign}`]] as [string, string][]) : []),
    task.dueAt ? ["By", when(task.dueAt)] : ["Since", when(task.createdAt)],
  ];
  const paragraphs = [holds ? "The campaign waits until it is done. All readings so far are kept." : "Nothing waits for it yet."];
  const link = `${appUrl}/tasks`;
  const foot = `Sent to ${listOf(task.recipients)}. Whoever does it answers it under Tasks.`;
  const sentence = /[.!?]$/.test(instruction) ? instruction : `${instruction}.`;
  const text = [sentence, "", ...paragraphs, "", ...facts.map(([name, value]) => `${name}: ${value}`), "", `Open the tasks: ${link}`, "", foot, `Change what you get: ${appUrl}/settings`, ""].join("\n");
  const html = frame({
    title: subject,
    from: `at ${laboratory}`,
    sentence,
    paragraphs,
    facts,
    button: { label: "Open the tasks", link },
    foot,
    settings: { label: "Change what you get", link: `${appUrl}/settings` },
  });
  return { subject, text, html };
}
