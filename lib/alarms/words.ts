/** What an alarm says of itself, apart from where it happened. */
type Said = { kind: string; text: string };

const TITLES: Readonly<Record<string, string>> = {
  return: "air reference not back within its limit",
  drift: "drift beyond its limit",
  step: "step beyond its limit",
  noise: "noise beyond its limit",
  fit: "too many fits cannot be used",
  temperature: "cell temperature outside its limit",
  count: "too many attempts failed in a row",
  silence: "rig agent silent",
  clock: "clock of the rig agent is off",
  "not-clean": "cleaning does not bring the reference back",
  measurement: "measuring is not possible",
};

/** The other title of a `return` limit: its control chart signals a steady move while the value itself may still be inside. */
const MOVES_AWAY = "air reference moves away from its baseline";

const movesAway = ({ kind, text }: Said): boolean => kind === "return" && text.includes("moves away from the baseline");

/** The text without the place at its start: "South bench: could not fill …" → "could not fill …". */
export function whatOf({ text }: Said): string {
  const colon = text.indexOf(": ");
  return colon < 0 ? text : text.slice(colon + 2);
}

/** What happened, in a few words for a head or a mail's subject: "could not fill Brine B-35". */
export function titleOf(alarm: Said): string {
  const known = movesAway(alarm) ? MOVES_AWAY : TITLES[alarm.kind];
  if (known) return known;
  if (alarm.kind.startsWith("task-")) return "a task cannot be done";
  return whatOf(alarm).split(": ", 1)[0];
}

/** What the title leaves unsaid, as sentences; empty when it says all. */
export function detailOf(alarm: Said): string {
  const what = whatOf(alarm);
  const title = titleOf(alarm);
  const rest = what === title ? "" : what.startsWith(`${title}: `) ? what.slice(title.length + 2) : what;
  if (rest === "") return "";
  return `${rest.charAt(0).toUpperCase()}${rest.slice(1)}${/[.!?”"]$/.test(rest) ? "" : "."}`;
}

const REPAIRS: Readonly<Record<string, string>> = {
  return: "Look at the air references of the campaign and at the cell; clean by hand where the liquid stayed.",
  drift: "Look at the drift of the campaign and decide whether the sensor may go on.",
  fit: "Look at the latest sweeps: the resonance may have left their span, or the signal is too weak.",
  temperature: "See to the thermostat of the rig.",
  count: "Look at the rig and at what its agent says.",
  silence: "See whether the rig's computer and its network are up. It goes on by itself once the agent is heard.",
  clock: "Set the clock of the rig's computer.",
  "not-clean": "Clean the cell by hand, or mount the sensor anew.",
  measurement: "Look at the latest sweeps: no resonance could be followed.",
};

/** What a person can do about it, in order. `held`: the campaign waits and does not go on by itself. */
export function stepsFor({ kind, held }: { kind: string; held: boolean }): string[] {
  const repair = REPAIRS[kind] ?? (kind.startsWith("task-") ? "Do the task, or see that somebody does." : "Look at the rig and put right what failed.");
  return held && kind !== "silence" ? [repair, "Press “Go on” in the campaign when it is seen to."] : [repair];
}
