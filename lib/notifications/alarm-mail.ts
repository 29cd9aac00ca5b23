import { detailOf, stepsFor, titleOf } from "@/lib/alarms/words";
import { formatUncertain, listOf, capitalised, formatCount, plural } from "@/lib/format";
import { formatDay, formatTime } from "@/lib/format-time";
import { frame, type StripCell } from "@/lib/mail/frame";

export type AlarmMail = {
  id: string;
  kind: string;
  text: string;
  actionText: string | null;
  openedAt: Date;
  /** The rig's own time of it. */
  openedClock: Date | null;
  rig: string;
  timeZone: string;
  simulated: boolean;
  campaignId: string | null;
  campaign: string | null;
  campaignState: string | null;
  serial: string | null;
  laboratory: string;
  progress: { cycle: number; cycles: number | null; repeats: number } | null;
  lastAir: { f0Hz: number; f0U: number | null; q: number; qU: number | null } | null;
  strip: readonly StripCell[];
  /** Names of everyone it goes to. */
  recipients: readonly string[];
  /** Until when somebody should have it, before it is sent once more. */
  againAt: Date | null;
  /** This is that second time, or it came back from the shelf. */
  again?: string;
  appUrl: string;
};

/** What happened, since when, how far off, what Longreed did, what to do and where, as plain text and as HTML that say the same. */
export function renderAlarmMail(alarm: AlarmMail): { subject: string; text: string; html: string } {
  const { rig, kind, campaign, campaignId, serial, appUrl, laboratory, strip } = alarm;
  const title = titleOf(alarm);
  const sentence = title.startsWith("could not") ? `${rig} ${title}` : `${rig}: ${title}`;
  const line = `${rig}${wordOf(alarm)} ${timeOf(alarm)}`;
  const paragraphs = [alarm.again, detailOf(alarm), alarm.actionText].filter((text): text is string => Boolean(text));
  const where = [rig, serial && `sensor ${serial}`, campaign && `campaign C-${campaignId}, ${campaign}`].filter(Boolean).join("; ");
  const todo = stepsFor({ kind, held: alarm.campaignState === "held" });
  const note = noteOf(alarm);
  const link = `${appUrl}/alarms/${alarm.id}`;
  const foot = footOf(alarm);
  const subject = subjectOf(alarm, title);

  const text = [
    `${sentence}.`,
    `${line}.`,
    "",
    ...paragraphs.flatMap((paragraph) => [paragraph, ""]),
    `Where: ${where}`,
    "",
    "What to do:",
    ...todo.map((step, i) => (todo.length > 1 ? `${i + 1}. ${step}` : step)),
    "",
    `Open the alarm, and say there that you have it: ${link}`,
    "",
    ...(note ? [note, ""] : []),
    foot,
    `Change which alarms you get: ${appUrl}/settings`,
    "",
  ].join("\n");
  const html = frame({
    title: subject,
    from: `at ${laboratory}`,
    alarm: line,
    sentence,
    paragraphs,
    todo,
    facts: [["Where", where]],
    button: { label: "Open the alarm", link },
    strip,
    note: note ?? undefined,
    foot,
    settings: { label: "Change which alarms you get", link: `${appUrl}/settings` },
  });
  return { subject, text, html };
}

const wordOf = ({ campaignState, kind }: AlarmMail) =>
  kind === "silence" ? ", silent as of" : campaignState === "held" ? ", halted" : campaignState === "stopped" ? ", stopped" : ",";

/** "Thu 14 May 06:18", by the rig's own clock where that is simulated. */
function timeOf({ openedClock, openedAt, timeZone, simulated }: AlarmMail): string {
  const at = simulated ? (openedClock ?? openedAt) : openedAt;
  return `${formatDay(at, timeZone, openedAt)} ${formatTime(at, timeZone)} (${simulated ? "the rig's simulated time" : `time of ${timeZone}`})`;
}

/** "South bench halted: could not fill Brine B-35", short enough for a phone's list. */
function subjectOf({ rig, campaignState, kind }: AlarmMail, title: string): string {
  const word = kind === "silence" ? "" : campaignState === "held" ? " halted" : campaignState === "stopped" ? " stopped" : "";
  const subject = `${rig}${word}: ${title}`.replaceAll(/[\r\n]+/g, " ");
  return subject.length > 120 ? `${subject.slice(0, 119)}…` : subject;
}

function noteOf({ progress, lastAir }: AlarmMail): string | null {
  if (!progress) return null;
  const cycle = progress.cycle > 0 ? `Cycle ${progress.cycle}${progress.cycles ? ` of ${progress.cycles}` : ""}, ` : "";
  const kept = `${cycle}${formatCount(progress.repeats)} ${plural(progress.repeats, "repeat")} kept.`;
  const air = lastAir ? ` Last air reference ${formatUncertain(lastAir.f0Hz, lastAir.f0U, { decimals: 3 })} Hz, Q ${formatUncertain(lastAir.q, lastAir.qU, { decimals: 1 })}.` : "";
  return capitalised(kept) + air;
}

function footOf({ recipients, againAt, timeZone }: AlarmMail): string {
  const again = againAt ? ` If nobody has it by ${formatTime(againAt, timeZone)}, it is sent once more.` : "";
  return `Sent to ${listOf(recipients)}.${again} Pause and Stop in a browser are no emergency stop; local safety rules and the laboratory's safety officer decide.`;
}
