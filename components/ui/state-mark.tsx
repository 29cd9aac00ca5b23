import type { ReactNode } from "react";
import { classNames } from "./class-names";

export type StateMarkName = "cell" | "wave" | "bars" | "ring" | "diamond" | "end" | "cross";

/** The words of the screen, each with its mark. Filling, Cleaning and Drying are Measuring's other words. */
const MARKS: Record<string, StateMarkName> = {
  Draft: "cell", Queued: "cell", Measuring: "wave", Filling: "wave", Cleaning: "wave", Drying: "wave",
  Paused: "bars", Waiting: "ring", Halted: "diamond", Finished: "end", "Stopped early": "end", Failed: "cross",
};

const DRAWINGS: Record<StateMarkName, ReactNode> = {
  wave: <svg width="18" height="10" viewBox="0 0 18 10"><path d="M0 5C1.5 -1 3 -1 4.5 5S7.5 11 9 5S12 -1 13.5 5S16.5 8 18 5" fill="none" stroke="currentColor" strokeWidth="1.6" /></svg>,
  diamond: <svg width="12" height="12" viewBox="0 0 12 12"><path d="M6 0l6 6l-6 6l-6 -6z" fill="currentColor" /></svg>,
  bars: <svg width="10" height="12"><path d="M2.5 1v10M7.5 1v10" stroke="currentColor" strokeWidth="2" /></svg>,
  end: <svg width="10" height="12"><path d="M2 0v12" stroke="currentColor" /><path d="M7 0v12" stroke="currentColor" strokeWidth="3.5" /></svg>,
  ring: <svg width="12" height="12"><circle cx="6" cy="6" r="4.75" fill="none" stroke="currentColor" strokeWidth="1.5" /></svg>,
  cross: <svg width="12" height="12"><path d="M1.5 1.5l9 9M10.5 1.5l-9 9" stroke="currentColor" strokeWidth="1.8" /></svg>,
  cell: <svg width="12" height="12"><path d="M1 11V2h10v9" fill="none" stroke="currentColor" strokeWidth="1.5" strokeDasharray="2 1.6" /></svg>,
};

/** The mark alone, for beside other words: a ring for a task that is due. */
export const Mark = ({ name }: { name: StateMarkName }) => <span className="inline-flex flex-none" aria-hidden="true">{DRAWINGS[name]}</span>;

/** A campaign's state: its mark and its word. Only Halted has the alarm colour, and only while nobody has seen to it. */
export function StateMark({ state, mark, needsPerson = state === "Halted", children }: { state: string; mark?: StateMarkName; needsPerson?: boolean; children?: ReactNode }) {
  const name = mark ?? MARKS[state] ?? (state.startsWith("Waiting") ? "ring" : "wave");
  return (
    <span className={classNames("state", needsPerson && "needs-person")}>
      <span className="state-cell" aria-hidden="true">{DRAWINGS[name]}</span>
      {children ?? state}
    </span>
  );
}
