import { Fragment } from "react";

/** Text in which `back-ticks` mark what is code. */
export function WithCode({ children }: { children: string }) {
  return <>{children.split("`").map((part, i) => (i % 2 === 1 ? <code key={i}>{part}</code> : <Fragment key={i}>{part}</Fragment>))}</>;
}
