import { Fragment } from "react";

/** Method and address; the address may break after a slash. */
export function CallName({ method, path }: { method: string; path: string }) {
  return (
    <code className="call-name">
      <b>{method}</b>{" "}
      {path.split(/(?<=\/)/).map((part, i) => <Fragment key={i}>{part}<wbr /></Fragment>)}
    </code>
  );
}
