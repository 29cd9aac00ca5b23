"use client";

import { Button } from "./button";

type MoreProps = { hasMore: boolean; busy: boolean; onMore: () => void; children: string };

/** The next page of a list, under it. */
export function More({ hasMore, busy, onMore, children }: MoreProps) {
  if (!hasMore) return null;
  return (
    <div className="table-foot">
      <Button small busy={busy} onClick={onMore}>{children}</Button>
    </div>
  );
}
