"use client";

import { usePathname, useRouter, useSearchParams } from "next/navigation";
import { useMemo } from "react";
import { readFilter, type FilterWord, type ListFilter } from "./list-filter";

/** The filter sentence of the list as the address has it, and a way to loosen it. */
export function useFilter(): { filter: ListFilter; sort: string | null; set: (changes: Partial<Record<FilterWord | "sort", string | null>>) => void } {
  const router = useRouter();
  const path = usePathname();
  const search = useSearchParams();
  const filter = useMemo(() => readFilter(Object.fromEntries(search)), [search]);
  const set = (changes: Partial<Record<FilterWord | "sort", string | null>>) => {
    const next = new URLSearchParams(search);
    for (const [name, value] of Object.entries(changes)) {
      if (value) next.set(name, value);
      else next.delete(name);
    }
    router.push(next.size > 0 ? `${path}?${next}` : path, { scroll: false });
  };
  return { filter, sort: search.get("sort"), set };
}
