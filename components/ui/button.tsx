"use client";

import Link from "next/link";
import type { ButtonHTMLAttributes, ReactNode } from "react";
import { classNames } from "./class-names";

type Look = {
  /** `primary`: the one verb of the page or slip. `link`: looks like a link. Default `plain`. */
  look?: "primary" | "plain" | "link";
  small?: boolean;
  className?: string;
  children: ReactNode;
};

export type ButtonProps = Look &
  Omit<ButtonHTMLAttributes<HTMLButtonElement>, "className" | "children" | "disabled"> & {
    /** Why the action is not possible now. The button stays visible, dashed, and says the reason. */
    notPossible?: string | null;
    /** Waiting for the answer of the server; a second press does nothing. */
    busy?: boolean;
  };

const look = (props: Pick<Look, "look" | "small" | "className">) =>
  classNames("button", props.look !== "plain" && props.look, props.small && "small", props.className);

export function Button({ look: kind = "plain", small, className, notPossible, busy, onClick, type = "button", children, ...rest }: ButtonProps) {
  const off = Boolean(notPossible) || busy;
  return (
    <button
      {...rest}
      type={type}
      className={look({ look: kind, small, className })}
      aria-disabled={notPossible ? true : undefined}
      aria-busy={busy || undefined}
      title={notPossible ?? rest.title}
      onClick={(event) => {
        if (off) event.preventDefault();
        else onClick?.(event);
      }}
    >
      {children}
      {notPossible && <span className="visually-hidden">, not possible: {notPossible}</span>}
    </button>
  );
}

/** A link that looks like a button, for verbs that open a page. */
export function LinkButton({ href, look: kind = "plain", small, className, children }: Look & { href: string }) {
  return (
    <Link href={href} className={look({ look: kind, small, className })}>
      {children}
    </Link>
  );
}

export function Buttons({ children, className }: { children: ReactNode; className?: string }) {
  return <div className={classNames("buttons", className)}>{children}</div>;
}
