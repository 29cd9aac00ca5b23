import type { ReactNode } from "react";

/** `Must fix` blocks queueing, `Check` does not. */
export function Tag({ kind }: { kind: "must" | "check" }) {
  return <span className={`tag ${kind}`}>{kind === "must" ? "Must fix" : "Check"}</span>;
}

/** An outlined word, for flags of a fit and the like. */
export function WordTag({ children }: { children: ReactNode }) {
  return <span className="tag check">{children}</span>;
}

export type Finding = { kind: "must" | "check"; text: ReactNode; repair?: ReactNode };

/** What stands in the way, each with its repair. */
export function Findings({ items }: { items: readonly Finding[] }) {
  return (
    <ul className="findings">
      {items.map(({ kind, text, repair }, i) => (
        <li key={i}>
          <span><Tag kind={kind} /></span>
          <div>
            {text}
            {repair && <div className="buttons">{repair}</div>}
          </div>
        </li>
      ))}
    </ul>
  );
}
