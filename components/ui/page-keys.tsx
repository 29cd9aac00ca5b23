"use client";

import { useRouter } from "next/navigation";
import { useEffect, useRef, useState } from "react";
import { Dialog } from "./dialog";
import type { Place } from "./places";

const FOLLOWS_WITHIN_MS = 1500;

export const isTyping = (target: EventTarget | null): boolean =>
  target instanceof HTMLElement && (target.isContentEditable || ["INPUT", "TEXTAREA", "SELECT"].includes(target.tagName));

/** `g` and a letter goes to a page, `?` lists the keys. */
export function PageKeys({ places }: { places: readonly Place[] }) {
  const router = useRouter();
  const [listed, setListed] = useState(false);
  const wentAt = useRef(-Infinity);

  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey || isTyping(event.target) || document.querySelector("[role=dialog],[role=alertdialog],[role=menu]")) return;
      if (event.key === "?") setListed(true);
      else if (event.key === "g") wentAt.current = event.timeStamp;
      else if (event.timeStamp - wentAt.current < FOLLOWS_WITHIN_MS) {
        wentAt.current = -Infinity;
        const place = places.find(({ key }) => key === event.key);
        if (place) router.push(place.href);
      }
    };
    document.addEventListener("keydown", onKey);
    return () => document.removeEventListener("keydown", onKey);
  }, [places, router]);

  return (
    <Dialog open={listed} onOpenChange={setListed} title="Keys">
      <table className="data-table">
        <tbody>
          <tr><td className="num">/</td><td>Find</td></tr>
          <tr><td className="num">?</td><td>This list</td></tr>
          {places.filter(({ key }) => key).map(({ key, label }) => (
            <tr key={label}><td className="num">g {key}</td><td>{label}</td></tr>
          ))}
          <tr><td className="num">← →</td><td>On a strip or plot: the phase or point before and after; with Shift by repeat</td></tr>
          <tr><td className="num">Esc</td><td>Close, or leave a selection</td></tr>
        </tbody>
      </table>
    </Dialog>
  );
}
