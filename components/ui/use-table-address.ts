"use client";

import { usePathname, useRouter, useSearchParams } from "next/navigation";
import { useCallback } from "react";

/** Sort and page of a table, kept in the address, so that a view can be sent to a colleague. */
export function useTableAddress(defaultSort: string) {
  const router = useRouter();
  const path = usePathname();
  const search = useSearchParams();

  const go = useCallback(
    (changes: Record<string, string | null>) => {
      const next = new URLSearchParams(search);
      for (const [name, value] of Object.entries(changes)) {
        if (value === null) next.delete(name);
        else next.set(name, value);
      }
      router.push(next.size > 0 ? `${path}?${next}` : path, { scroll: false });
    },
    [path, router, search],
  );

  return {
    sort: search.get("sort") ?? defaultSort,
    pageNumber: Math.max(1, Math.trunc(Number(search.get("page"))) || 1),
    onSort: useCallback((sort: string) => go({ sort: sort === defaultSort ? null : sort, page: null }), [defaultSort, go]),
    onPage: useCallback((page: number) => go({ page: page === 1 ? null : String(page) }), [go]),
  };
}
