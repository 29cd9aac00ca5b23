export type Cell = string | number | boolean | null;

export type Column = {
  name: string;
  /** Empty where there is none; `1` for pure numbers. */
  unit: string;
  /** For the sheet that explains the columns. */
  what: string;
};

/** What is exported, in batches of rows: a million of them pass in constant memory. */
export type Table = { name: string; columns: readonly Column[]; rows: AsyncIterable<readonly (readonly Cell[])[]> };

/** What somebody who opens the file in ten years has to know of it. */
export type About = readonly (readonly [label: string, value: string | number])[];
