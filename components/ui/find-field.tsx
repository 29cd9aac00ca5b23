"use client";

import { keepPreviousData, useQuery } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useEffect, useId, useRef, useState, type KeyboardEvent } from "react";
import { FindList, type Hit } from "./find-list";
import { isTyping } from "./page-keys";
import { useLater } from "./use-later";

export type FindFieldProps = {
  /** Answers while one types; the signal ends what is out of date. Without it the field only leads to the page. */
  onFind?: (words: string, signal: AbortSignal) => Promise<{ hits: readonly Hit[]; total: number }>;
};

const LATER_MS = 200;
const pageOf = (words: string) => `/find?${new URLSearchParams({ q: words })}`;

/** Finds campaigns, sensors, liquids and more as one types; `/` goes to it. Enter without a choice opens the page of all. */
export function FindField({ onFind }: FindFieldProps) {
  const router = useRouter();
  const listId = useId();
  const input = useRef<HTMLInputElement>(null);
  const [words, setWords] = useState("");
  const [open, setOpen] = useState(false);
  const [chosen, setChosen] = useState(-1);
  const typed = words.trim();
  const asked = useLater(typed, LATER_MS);
  const { data, isFetching } = useQuery({
    queryKey: ["find now", asked],
    queryFn: ({ signal }) => onFind?.(asked, signal) ?? { hits: [], total: 0 },
    enabled: open && asked !== "" && onFind !== undefined,
    placeholderData: keepPreviousData,
    staleTime: 10_000,
  });
  useSlashKey(input);

  const shown = open && typed !== "" && data !== undefined && onFind !== undefined;
  const hrefs = shown ? [...data.hits.map(({ href }) => href), ...(data.total > 0 ? [pageOf(typed)] : [])] : [];

  const go = (href: string) => {
    setOpen(false);
    setWords("");
    input.current?.blur();
    router.push(href);
  };

  const onKeyDown = (event: KeyboardEvent) => {
    if (event.key === "Escape") {
      if (open) setOpen(false);
      else input.current?.blur();
    } else if ((event.key === "ArrowDown" || event.key === "ArrowUp") && hrefs.length > 0) {
      const places = hrefs.length + 1; // one of them is the field itself
      setChosen((chosen + 1 + (event.key === "ArrowDown" ? 1 : places - 1)) % places - 1);
    } else return;
    event.preventDefault();
  };

  return (
    <form
      className="find"
      role="search"
      aria-label="Find from any page"
      action="/find"
      onSubmit={(event) => {
        event.preventDefault();
        if (typed) go(hrefs[chosen] ?? pageOf(typed));
      }}
      onBlur={(event) => !event.currentTarget.contains(event.relatedTarget) && setOpen(false)}
    >
      <input
        ref={input}
        type="search"
        name="q"
        role="combobox"
        placeholder="Find sensor, campaign, liquid"
        aria-label="Find sensor, campaign, liquid"
        aria-keyshortcuts="/"
        aria-autocomplete="list"
        aria-expanded={shown}
        aria-controls={shown ? listId : undefined}
        aria-activedescendant={shown && chosen >= 0 ? `${listId}-${chosen}` : undefined}
        autoComplete="off"
        maxLength={100}
        value={words}
        onChange={(event) => {
          setWords(event.target.value);
          setOpen(true);
          setChosen(-1);
        }}
        onFocus={() => setOpen(true)}
        onKeyDown={onKeyDown}
      />
      <kbd aria-hidden="true">/</kbd>
      {shown && <FindList id={listId} words={asked} busy={isFetching || asked !== typed} hits={data.hits} total={data.total} allHref={pageOf(typed)} chosen={chosen} onChoose={setChosen} onGo={go} />}
    </form>
  );
}

/** `/` focuses the field, or opens the page where the field has no room. */
function useSlashKey(input: { current: HTMLInputElement | null }) {
  const router = useRouter();
  useEffect(() => {
    const onKey = (event: globalThis.KeyboardEvent) => {
      if (event.key !== "/" || event.ctrlKey || event.metaKey || event.altKey || isTyping(event.target)) return;
      event.preventDefault();
      if (input.current?.checkVisibility()) input.current.focus();
      else router.push("/find");
    };
    document.addEventListener("keydown", onKey);
    return () => document.removeEventListener("keydown", onKey);
  }, [input, router]);
}
