"use client";

import { usePathname, useRouter, useSearchParams } from "next/navigation";
import type { ReactNode } from "react";
import { Menu, MenuChoice } from "./menu";

export type Choice = { value: string; label: string; note?: string };

type ChoiceWordProps = { label: string; value: string; options: readonly Choice[]; onChoose: (value: string) => void };

/** An underlined word of a sentence; pressing it opens what else it could be. */
export function ChoiceWord({ label, value, options, onChoose }: ChoiceWordProps) {
  const chosen = options.find((option) => option.value === value);
  return (
    <Menu label={label} trigger={<button type="button" className="word" aria-label={`${label}: ${chosen?.label ?? value}`}>{chosen?.label ?? value}</button>}>
      <MenuChoice value={value} options={options} onChoose={onChoose} />
    </Menu>
  );
}

/** A choice kept in the address under `name`; the `fallback` is not written there. */
export function AddressWord({ name, label, options, fallback = "" }: { name: string; label: string; options: readonly Choice[]; fallback?: string }) {
  const router = useRouter();
  const path = usePathname();
  const search = useSearchParams();
  const choose = (value: string) => {
    const next = new URLSearchParams(search);
    if (value === fallback) next.delete(name);
    else next.set(name, value);
    next.delete("page");
    router.push(next.size > 0 ? `${path}?${next}` : path, { scroll: false });
  };
  return <ChoiceWord label={label} value={search.get(name) ?? fallback} options={options} onChoose={choose} />;
}

/** `Show <every state> on <every rig>.` */
export function ChoiceSentence({ children }: { children: ReactNode }) {
  return <p className="sentence">{children}</p>;
}
