import { classNames } from "./class-names";

export type Hit = { key: string; kind: string; name: string; note: string; href: string; quiet?: boolean };

type FindListProps = {
  id: string;
  words: string;
  busy: boolean;
  hits: readonly Hit[];
  total: number;
  allHref: string;
  /** The option under the keyboard's cursor; -1 is the field itself. */
  chosen: number;
  onChoose: (index: number) => void;
  onGo: (href: string) => void;
};

/** What was found so far, under the find field. The focus stays in the field; the field's keys move the choice. */
export function FindList({ id, words, busy, hits, total, allHref, chosen, onChoose, onGo }: FindListProps) {
  const option = (index: number, href: string) => ({
    id: `${id}-${index}`,
    role: "option",
    "aria-selected": index === chosen,
    onPointerMove: () => onChoose(index),
    onPointerDown: (event: { preventDefault: () => void }) => event.preventDefault(),
    onClick: () => onGo(href),
  });
  return (
    <>
      <ul id={id} role="listbox" aria-label="Found" aria-busy={busy} className={classNames("menu find-list", hits.length === 0 && "nothing")}>
        {hits.map(({ key, kind, name, note, href, quiet }, index) => (
          <li key={key} {...option(index, href)} className={quiet ? "text-ink3" : undefined}>
            <span className="what"><b>{name}</b><small>{note}</small></span>
            <span className="note">{kind}</span>
          </li>
        ))}
        {total > 0 && <li {...option(hits.length, allHref)}>{total === hits.length ? "Show as a page" : `All ${total}`}</li>}
      </ul>
      {hits.length === 0 && <p className="menu find-list px-3.5 text-ink2">Nothing has “{words}” in it.</p>}
      <span role="status" className="visually-hidden">{busy ? "" : `${total} found`}</span>
    </>
  );
}
