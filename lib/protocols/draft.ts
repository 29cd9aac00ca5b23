/** A protocol as it is being written: any field may be missing or wrong, but every block and limit has its id. */
export type DraftBlock = {
  readonly id: string;
  readonly kind: string;
  readonly blocks?: readonly DraftBlock[];
  readonly measure?: DraftBlock;
  readonly [field: string]: unknown;
};
export type DraftLimit = { readonly id: string; readonly kind: string; readonly [field: string]: unknown };

export const LISTS = ["blocks", "cleaning", "park"] as const;
export type ListName = (typeof LISTS)[number];

export type Draft = {
  readonly blocks: readonly DraftBlock[];
  readonly cleaning?: readonly DraftBlock[];
  readonly park?: readonly DraftBlock[];
  readonly limits: readonly DraftLimit[];
  readonly [field: string]: unknown;
};

type MakeId = () => string;

/** Takes whatever was stored as a draft, or a saved definition. What is no block is left out; ids that are missing or stand twice are made. */
export function readDraft(stored: Readonly<Record<string, unknown>>, makeId: MakeId): Draft {
  const taken = new Set<string>();
  const idFor = (id: unknown): string => {
    let own = typeof id === "string" && id !== "" && !taken.has(id) ? id : makeId();
    while (taken.has(own)) own = makeId();
    taken.add(own);
    return own;
  };
  const readBlock = (given: Fields): DraftBlock => {
    const { blocks, measure, ...own } = given;
    return {
      ...own,
      id: idFor(given.id),
      kind: String(given.kind),
      ...(Array.isArray(blocks) && { blocks: readList(blocks) }),
      ...(isFields(measure) && { measure: readBlock({ ...measure, kind: "measure" }) }),
    };
  };
  const readList = (given: unknown): DraftBlock[] => (Array.isArray(given) ? given.filter(isFields).map(readBlock) : []);
  const { blocks, cleaning, park, limits, ...own } = stored;
  return {
    ...own,
    blocks: readList(blocks),
    ...(Array.isArray(cleaning) && cleaning.length > 0 && { cleaning: readList(cleaning) }),
    ...(Array.isArray(park) && park.length > 0 && { park: readList(park) }),
    limits: Array.isArray(limits) ? limits.filter(isFields).map((limit) => ({ ...limit, id: idFor(limit.id), kind: String(limit.kind) })) : [],
  };
}

/** The same record with another value at a dotted path; `undefined` takes the field away. Objects on the way are made. */
export function setAt<T extends Fields>(record: T, path: string, value: unknown): T {
  const [key, ...rest] = path.split(".");
  const inner = record[key];
  const next = rest.length === 0 ? value : setAt(isFields(inner) ? inner : {}, rest.join("."), value);
  const left = next === undefined ? Object.entries(record).filter(([name]) => name !== key) : Object.entries({ ...record, [key]: next });
  return Object.fromEntries(left) as T;
}

/** A copy with ids of its own, inner blocks too. */
export function copyBlock(block: DraftBlock, makeId: MakeId): DraftBlock {
  return {
    ...block,
    id: makeId(),
    ...(block.blocks && { blocks: block.blocks.map((inner) => copyBlock(inner, makeId)) }),
    ...(block.measure && { measure: copyBlock(block.measure, makeId) }),
  };
}

type Fields = Readonly<Record<string, unknown>>;
export const isFields = (value: unknown): value is Fields => typeof value === "object" && value !== null && !Array.isArray(value);
