import { formatCount } from "@/lib/format";
import { Button } from "./button";

/** `number` counts from 1. */
export type PageOf = { number: number; size: number; total: number };

export function TablePages({ page, onPage, label }: { page: PageOf; onPage: (page: number) => void; label: string }) {
  const last = Math.max(1, Math.ceil(page.total / page.size));
  const from = (page.number - 1) * page.size + 1;
  const to = Math.min(page.total, page.number * page.size);
  if (last === 1) return null;
  return (
    <nav className="table-foot" aria-label={`Pages of ${label}`}>
      <span className="num">{formatCount(from)} to {formatCount(to)} of {formatCount(page.total)}</span>
      <div className="buttons">
        <Button small notPossible={page.number <= 1 ? "this is the first page" : null} onClick={() => onPage(page.number - 1)}>Before</Button>
        <Button small notPossible={page.number >= last ? "this is the last page" : null} onClick={() => onPage(page.number + 1)}>Next</Button>
      </div>
    </nav>
  );
}
