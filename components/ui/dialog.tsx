"use client";

import * as Radix from "@radix-ui/react-dialog";
import { useRef, type ReactNode } from "react";
import { Button } from "./button";
import { classNames } from "./class-names";

type DialogProps = {
  open: boolean;
  onOpenChange: (open: boolean) => void;
  title: ReactNode;
  /** What it is about, read out with the title. */
  description?: ReactNode;
  wide?: boolean;
  children?: ReactNode;
};

/** A sheet over the page. Escape and a press outside close it; the focus goes back to where it was. */
export function Dialog({ open, onOpenChange, title, description, wide, children }: DialogProps) {
  return (
    <Radix.Root open={open} onOpenChange={onOpenChange}>
      <Radix.Portal>
        <Radix.Overlay className="dialog-shade" />
        <Radix.Content className={classNames("dialog", wide && "wide")} {...(description ? {} : { "aria-describedby": undefined })}>
          <Radix.Title asChild><h2>{title}</h2></Radix.Title>
          {description && <Radix.Description asChild><div className="cost">{description}</div></Radix.Description>}
          {children}
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}

type ConfirmDialogProps = {
  open: boolean;
  onOpenChange: (open: boolean) => void;
  /** Names the thing: `Stop C-118 for good?` */
  title: ReactNode;
  /** Names the cost: `712 repeats would not be measured.` */
  cost: ReactNode;
  /** The safe choice; primary, has the focus: `Keep measuring`. */
  keep: string;
  /** The verb: `Stop`. */
  act: string;
  onAct: () => void;
  busy?: boolean;
  notPossible?: string | null;
  /** Fields, and the problem if the last try failed. */
  children?: ReactNode;
};

/** Asks before something that costs. */
export function ConfirmDialog({ open, onOpenChange, title, cost, keep, act, onAct, busy, notPossible, children }: ConfirmDialogProps) {
  const safe = useRef<HTMLDivElement>(null);
  return (
    <Radix.Root open={open} onOpenChange={onOpenChange}>
      <Radix.Portal>
        <Radix.Overlay className="dialog-shade" />
        <Radix.Content
          className="dialog"
          role="alertdialog"
          onOpenAutoFocus={(event) => {
            event.preventDefault();
            safe.current?.querySelector("button")?.focus();
          }}
        >
          <Radix.Title asChild><h2>{title}</h2></Radix.Title>
          <Radix.Description asChild><div className="cost">{cost}</div></Radix.Description>
          {children && <div className="mt-3">{children}</div>}
          <div className="buttons" ref={safe}>
            <Button look="primary" onClick={() => onOpenChange(false)}>{keep}</Button>
            <Button onClick={onAct} busy={busy} notPossible={notPossible}>{act}</Button>
          </div>
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}
