"use client";

import { useRouter } from "next/navigation";
import { useEffect } from "react";
import { Button, LinkButton } from "@/components/ui/button";
import { isTyping } from "@/components/ui/page-keys";
import { formatCount } from "@/lib/format";
import type { SweepAnswer } from "@/lib/readings/schema";

type Place = { sequence: number; index: number };

/** Previous, next, next flagged; left, right and `n` do the same outside of plots. */
export function WalkButtons({ code, sweep }: { code: string; sweep: SweepAnswer }) {
  const router = useRouter();
  const { previous, next, nextFlagged } = sweep.place ?? { previous: null, next: null, nextFlagged: null };

  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.defaultPrevented || event.ctrlKey || event.metaKey || event.altKey || event.shiftKey || isTyping(event.target)) return;
      if (event.target instanceof SVGElement || document.querySelector("[role=dialog],[role=alertdialog],[role=menu]")) return;
      if (event.target instanceof HTMLInputElement) return;
      const to = { ArrowLeft: previous, ArrowRight: next, n: nextFlagged }[event.key];
      if (!to) return;
      event.preventDefault();
      router.push(readingHref(code, to), { scroll: false });
    };
    document.addEventListener("keydown", onKey);
    return () => document.removeEventListener("keydown", onKey);
  }, [router, code, previous, next, nextFlagged]);

  const word = ({ sequence, index }: Place) => (sequence === sweep.sequence ? formatCount(index + 1) : `step ${sequence}`);
  return (
    <>
      <span className="small self-center text-ink2">Left and right arrow</span>
      {previous ? <LinkButton href={readingHref(code, previous)}>← {word(previous)}</LinkButton> : <Button notPossible="this is the first repeat">←</Button>}
      {next ? <LinkButton href={readingHref(code, next)}>{word(next)} →</LinkButton> : <Button notPossible="this is the last repeat">→</Button>}
      {nextFlagged ? <LinkButton href={readingHref(code, nextFlagged)}>Next flagged</LinkButton> : <Button notPossible="no later repeat carries a flag">Next flagged</Button>}
    </>
  );
}

export const readingHref = (code: string, { sequence, index }: Place): string => `/campaigns/${code}/readings/${sequence}/${index}`;
