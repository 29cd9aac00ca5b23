"use client";

import { useEffect, useRef } from "react";
import { isTyping } from "./page-keys";

/** Finds sensors, campaigns, liquids; `/` goes to it. The answer is a page of its own. */
export function FindField() {
  const input = useRef<HTMLInputElement>(null);

  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.key !== "/" || event.ctrlKey || event.metaKey || event.altKey || isTyping(event.target)) return;
      event.preventDefault();
      input.current?.focus();
    };
    document.addEventListener("keydown", onKey);
    return () => document.removeEventListener("keydown", onKey);
  }, []);

  return (
    <form className="find" role="search" action="/find">
      <input ref={input} type="search" name="q" placeholder="Find sensor, campaign, liquid" aria-label="Find sensor, campaign, liquid" aria-keyshortcuts="/" autoComplete="off" />
      <kbd aria-hidden="true">/</kbd>
    </form>
  );
}
