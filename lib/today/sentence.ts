import { capitalised, inWords, listOf, plural } from "@/lib/format";
import { formatDay, formatTime, startOfLocalDay } from "@/lib/format-time";

export type SaidRig = {
  name: string;
  timeZone: string;
  /** By the rig's clock. */
  now: string | null;
  /** The screen's word for its campaign; undefined when it is free. */
  word?: string;
  setAside?: boolean;
  silent: boolean;
  lastContactAt: string | null;
  haltedAt: string | null;
  takenOnBy: string | null;
};

const IDLE = new Set(["Halted", "Waiting", "Paused", "Stopped early", "Failed", "Finished"]);
const MOST_NAMED = 2;

/**
 * The sentence of the page: how many rigs measure, then what needs a person, the worst first. "Three rigs are measuring.
 * South bench halted at 06:18 and needs a person."
 */
export function todaySentence({ rigs, now, openAlarms }: { rigs: readonly SaidRig[]; now: string; openAlarms: number }): string {
  if (rigs.length === 0) return "No rig has been set up yet.";
  const halted = rigs.filter(({ word }) => word === "Halted");
  const silent = rigs.filter((rig) => rig.silent && rig.word !== "Halted");
  const waiting = rigs.filter(({ word }) => word === "Waiting");
  const paused = rigs.filter(({ word }) => word === "Paused");
  const measuring = rigs.filter(({ word, silent: quiet }) => word !== undefined && !IDLE.has(word) && !quiet);
  const said = [
    measuringSentence(measuring, rigs),
    haltedSentence(halted),
    silentSentence(silent, now),
    waiting.length > 0 && `${namesOf(waiting)} ${plural(waiting.length, "waits", "wait")} for a task.`,
    paused.length > 0 && `${namesOf(paused)} ${plural(paused.length, "is", "are")} paused.`,
    openAlarms > 0 && halted.length + silent.length === 0 && `${capitalised(inWords(openAlarms))} ${plural(openAlarms, "alarm is", "alarms are")} open that nobody has.`,
  ];
  return said.filter(Boolean).join(" ");
}

function measuringSentence(measuring: readonly SaidRig[], rigs: readonly SaidRig[]): string {
  if (measuring.length === 0) return rigs.every(({ word }) => word === undefined) ? `${rigs.length === 1 ? `${rigs[0].name} is` : `${allOf(rigs)} are`} free.` : "No rig is measuring.";
  if (measuring.length === 1) return `${measuring[0].name} is measuring.`;
  return measuring.length === rigs.length ? `${allOf(rigs)} are measuring.` : `${capitalised(inWords(measuring.length))} rigs are measuring.`;
}

const allOf = (rigs: readonly SaidRig[]) => (rigs.length === 2 ? "Both rigs" : `All ${inWords(rigs.length)} rigs`);

function haltedSentence(halted: readonly SaidRig[]): string {
  if (halted.length === 0) return "";
  const [first] = halted;
  if (halted.length > 1) {
    const taken = halted.every(({ takenOnBy }) => takenOnBy !== null);
    return `${namesOf(halted)} have halted and ${taken ? "are being seen to" : "need a person"}.`;
  }
  const since = first.haltedAt ? ` ${timeFor(first.haltedAt, first.now ?? first.haltedAt, first.timeZone)}` : "";
  return `${first.name} halted${since} and ${first.takenOnBy ? `${first.takenOnBy} has it` : "needs a person"}.`;
}

function silentSentence(silent: readonly SaidRig[], now: string): string {
  if (silent.length === 0) return "";
  const [{ lastContactAt, timeZone }] = silent;
  const since = silent.length === 1 && lastContactAt ? ` since ${timeFor(lastContactAt, now, timeZone).replace(/^(at|on) /, "")}` : "";
  return `Nothing has been heard of ${namesOf(silent)}${since}.`;
}

const namesOf = (rigs: readonly SaidRig[]): string =>
  rigs.length > MOST_NAMED + 1 ? `${capitalised(inWords(rigs.length))} rigs` : listOf(rigs.map(({ name }) => name));

/** "at 06:18" today, else "on Wed 13 May at 06:18". */
function timeFor(at: string, now: string, zone: string): string {
  const today = startOfLocalDay(at, zone) === startOfLocalDay(now, zone);
  return today ? `at ${formatTime(at, zone)}` : `on ${formatDay(at, zone, now)} at ${formatTime(at, zone)}`;
}
