"use client";

import * as DropdownMenu from "@radix-ui/react-dropdown-menu";
import Link from "next/link";
import type { ReactElement, ReactNode } from "react";
import type { Place } from "./places";

type MenuProps = { trigger: ReactElement; label?: string; align?: "start" | "end" | "center"; children: ReactNode };

/** A menu under the element that opens it; arrows, letters and Escape work. */
export function Menu({ trigger, label, align = "start", children }: MenuProps) {
  return (
    <DropdownMenu.Root modal={false}>
      <DropdownMenu.Trigger asChild>{trigger}</DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content className="menu" align={align} sideOffset={6} collisionPadding={12} aria-label={label}>
          {children}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}

type MenuItemProps = { onSelect: () => void; note?: ReactNode; notPossible?: string | null; children: ReactNode };

export function MenuItem({ onSelect, note, notPossible, children }: MenuItemProps) {
  return (
    <DropdownMenu.Item disabled={Boolean(notPossible)} onSelect={onSelect}>
      {children}
      {(notPossible ?? note) && <span className="note">{notPossible ?? note}</span>}
    </DropdownMenu.Item>
  );
}

export function MenuLink({ place, current }: { place: Place; current?: boolean }) {
  return (
    <DropdownMenu.Item asChild>
      <Link href={place.href} aria-current={current ? "page" : undefined}>
        {place.label}
      </Link>
    </DropdownMenu.Item>
  );
}

type MenuChoiceProps<V extends string> = { value: V; onChoose: (value: V) => void; options: readonly { value: V; label: ReactNode; note?: ReactNode }[]; label?: string };

/** One of several, the chosen one in a heavier word. */
export function MenuChoice<V extends string>({ value, onChoose, options, label }: MenuChoiceProps<V>) {
  return (
    <>
      {label && <DropdownMenu.Label className="group">{label}</DropdownMenu.Label>}
      <DropdownMenu.RadioGroup value={value} onValueChange={(chosen) => onChoose(chosen as V)}>
        {options.map((option) => (
          <DropdownMenu.RadioItem key={option.value} value={option.value}>
            {option.label}
            {option.note && <span className="note">{option.note}</span>}
          </DropdownMenu.RadioItem>
        ))}
      </DropdownMenu.RadioGroup>
    </>
  );
}

export const MenuRule = () => <DropdownMenu.Separator asChild><hr /></DropdownMenu.Separator>;
