import type { ReactNode } from "react";
import { classNames } from "./class-names";
import { Mark } from "./state-mark";

type SlipProps = {
  /** `alarm`: nobody has it. `sending`: answered, not out yet. Default `task`. */
  kind?: "alarm" | "task" | "sending";
  /** `Today by 13:50`, `Open for 3 h 24 min`. */
  when: ReactNode;
  /** `in 4 h 8 min`; left out on a phone. */
  remark?: ReactNode;
  /** At the right of the first line, such as `Sending`. */
  status?: ReactNode;
  title: ReactNode;
  /** The one in hand is framed. */
  inHand?: boolean;
  actions?: ReactNode;
  children?: ReactNode;
};

/** What needs a person, as a slip of paper: when, what, why, and the verbs. */
export function Slip({ kind = "task", when, remark, status, title, inHand, actions, children }: SlipProps) {
  return (
    <article className={classNames("slip", kind !== "task" && kind, inHand && "in-hand")}>
      <div className="when">
        <Mark name={kind === "alarm" ? "diamond" : "ring"} />
        <b>{when}</b>
        {remark && <span className="desk">{remark}</span>}
        {status && <span className="ml-auto">{status}</span>}
      </div>
      <h2>{title}</h2>
      {children}
      {actions && <div className="buttons">{actions}</div>}
    </article>
  );
}

/** `withAlarm` widens the first slip; `column` is for Tasks. */
export function Slips({ withAlarm, column, children }: { withAlarm?: boolean; column?: boolean; children: ReactNode }) {
  return (
    <div role="group" aria-label="Needs a person" className={classNames("slips", withAlarm && "with-alarm", column && "column")}>
      {children}
    </div>
  );
}
