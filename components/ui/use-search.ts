"use client";

import { usePathname, useRouter, useSearchParams } from "next/navigation";

/** The word that a list is searched for, kept in the address. */
export function useSearch(): { search: string; onSearch: (search: string) => void } {
  const router = useRouter();
  const path = usePathname();
  const params = useSearchParams();
  const onSearch = (search: string) => {
    const next = new URLSearchParams(params);
    if (search.trim()) next.set("search", search.trim());
    else next.delete("search");
    router.replace(next.size > 0 ? `${path}?${next}` : path, { scroll: false });
  };
  return { search: params.get("search")?.slice(0, 100) ?? "", onSearch };
}
