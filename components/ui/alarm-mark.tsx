import type { ReactNode } from "react";
import { classNames } from "./class-names";

/** ISA-18.2; `shelved` lies over any of the others. */
export type AlarmState = "unacknowledged" | "acknowledged" | "returned" | "cleared" | "shelved";

const DRAWINGS: Record<AlarmState, ReactNode> = {
  unacknowledged: <svg width="12" height="12" viewBox="0 0 12 12"><path d="M6 0l6 6l-6 6l-6 -6z" fill="currentColor" /></svg>,
  acknowledged: <svg width="12" height="12" viewBox="0 0 12 12"><path d="M6 .8l5.2 5.2l-5.2 5.2l-5.2 -5.2z" fill="none" stroke="currentColor" strokeWidth="1.3" /><path d="M.8 6H11.2L6 11.2z" fill="currentColor" /></svg>,
  returned: <svg width="12" height="12" viewBox="0 0 12 12"><path d="M6 .8l5.2 5.2l-5.2 5.2l-5.2 -5.2z" fill="none" stroke="currentColor" strokeWidth="1.4" /></svg>,
  cleared: <svg width="12" height="12"><path d="M0 8.5H12" stroke="currentColor" strokeWidth="1.6" /></svg>,
  shelved: <svg width="14" height="12" viewBox="0 0 14 12"><path d="M7 .6l3.8 3.8l-3.8 3.8l-3.8 -3.8z" fill="none" stroke="currentColor" strokeWidth="1.3" /><path d="M0 10.5H14" stroke="currentColor" strokeWidth="1.8" /></svg>,
};

/** `by` is who has it; `until` the time a shelved one comes back. */
export function AlarmMark({ state, by, until }: { state: AlarmState; by?: string; until?: string }) {
  const words: Record<AlarmState, string> = {
    unacknowledged: "Nobody has it",
    acknowledged: `${by ?? "Somebody"} has it`,
    returned: "Back within the limit, nobody looked",
    cleared: "Cleared",
    shelved: until ? `Shelved until ${until}` : "Shelved",
  };
  return (
    <span className={classNames("state whitespace-normal", state === "unacknowledged" && "needs-person")}>
      <span className="inline-flex" aria-hidden="true">{DRAWINGS[state]}</span>
      {words[state]}
    </span>
  );
}
