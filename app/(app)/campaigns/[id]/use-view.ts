"use client";

import { usePathname, useSearchParams } from "next/navigation";
import { useCallback, useMemo } from "react";
import { readView, type View } from "./view";

/** What the page shows, as its address has it. Changes go into the address without asking the server for the page again. */
export function useView(): { view: View; set: (changes: Record<string, string | null>) => void; onWindow: (from: string, to: string) => void; onWhole: () => void } {
  const path = usePathname();
  const search = useSearchParams();
  const view = useMemo(() => readView(Object.fromEntries(search)), [search]);
  const set = useCallback(
    (changes: Record<string, string | null>) => {
      const next = new URLSearchParams(window.location.search);
      for (const [name, value] of Object.entries(changes)) {
        if (value) next.set(name, value);
        else next.delete(name);
      }
      window.history.pushState(null, "", next.size > 0 ? `${path}?${next}` : path);
    },
    [path],
  );
  const onWindow = useCallback((from: string, to: string) => set({ from, to }), [set]);
  const onWhole = useCallback(() => set({ from: null, to: null }), [set]);
  return { view, set, onWindow, onWhole };
}
