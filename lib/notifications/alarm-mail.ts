import { formatDay, formatTime } from "@/lib/format-time";
import { frame } from "@/lib/mail/frame";

export type AlarmMail = {
  id: string;
  kind: string;
  text: string;
  actionText: string | null;
  value: number | null;
  limitValue: number | null;
  unit: string | null;
  openedAt: Date;
  openedClock: Date | null;
  rig: string;
  timeZone: string;
  simulated: boolean;
  campaignId: string | null;
  campaign: string | null;
  campaignState: string | null;
  serial: string | null;
  recipients: readonly string[];
  link: string;
};

/** What, where, since when, how far off, what Longreed did about it, and where to look, as plain text and as HTML. */
export function renderAlarmMail(alarm: AlarmMail): { subject: string; text: string; html: string } {
  const lines = facts(alarm);
  const subject = subjectOf(alarm);
  const others = alarm.recipients.join(", ");
  const text = [
    `${alarm.text}.`,
    "",
    ...lines.map(([name, value]) => `${name}: ${value}`),
    "",
    `Open the alarm: ${alarm.link}`,
    "",
    `Sent to ${others}. Whoever takes it on can say so there with "I have this".`,
    "Pause and Stop in a browser are no emergency stop; local safety rules and the laboratory's safety officer decide.",
    "",
  ].join("\n");
  const html = frame({
    title: subject,
    sentence: `${alarm.text}.`,
    facts: lines,
    button: { label: "Open the alarm", link: alarm.link },
    foot: `Sent to ${others}. Pause and Stop in a browser are no emergency stop; local safety rules and the laboratory's safety officer decide.`,
  });
  return { subject, text, html };
}

/** "South bench halted: fill of Brine B-35 failed", short enough for a phone's list. */
function subjectOf({ rig, text, campaignState, kind }: AlarmMail): string {
  const what = text.startsWith(`${rig}: `) ? text.slice(rig.length + 2) : text;
  const word = campaignState === "held" ? " halted" : campaignState === "stopped" ? " stopped" : kind === "silence" ? " is silent" : "";
  const subject = `${rig}${word}: ${what}`;
  return subject.length > 150 ? `${subject.slice(0, 147)}…` : subject;
}

function facts({ rig, campaign, campaignId, serial, openedAt, openedClock, timeZone, simulated, actionText }: AlarmMail): [string, string][] {
  const when = openedClock ?? openedAt;
  const since = `${formatDay(when, timeZone, openedAt)} ${formatTime(when, timeZone)} (${simulated ? "simulated rig time" : "rig time"}, ${timeZone})`;
  const where = [rig, serial ? `sensor ${serial}` : null, campaign ? `campaign C-${campaignId}, ${campaign}` : null].filter(Boolean).join(", ");
  return [["Where", where], ["Since", since], ...(actionText ? ([["What Longreed did", actionText]] as [string, string][]) : [])];
}

