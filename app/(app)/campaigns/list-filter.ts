import { campaignQuery } from "@/lib/campaigns/answers";

/** The words of the filter sentence, as they are called in the address. */
export type FilterWord = "state" | "rig" | "sensor" | "search";

export type Place = "on-rigs" | "in-line" | "done" | "draft";

export type ListFilter = { state?: Place; rigId?: string; sensorId?: string; search?: string };

export const PLACES: readonly { place: Place; head: string; end: string; sort: string; note: string }[] = [
  {
    place: "on-rigs",
    head: "On the rigs",
    end: "Expected end",
    sort: "oldest",
    note: "Each strip begins at its own start; all are to one scale, a line a week. The last column is the newest air reference against the baseline, on its limit.",
  },
  { place: "in-line", head: "In line", end: "Expected end", sort: "line", note: "Priority orders this list." },
  { place: "done", head: "Done", end: "Ended", sort: "-end", note: "Nothing is deleted. A finished campaign can be exported or made again." },
  { place: "draft", head: "Drafts", end: "Expected end", sort: "newest", note: "Not queued yet." },
];

const SORTS = campaignQuery.shape.sort;

/** How a table asks for its rows: the sort of the address, or the table's own. */
export const sortOf = (place: { sort: string }, sort: string | null): string => (sort !== null && SORTS.safeParse(sort).success ? sort : place.sort);

/** The filter in an address; what is not one is left out. */
export function readFilter({ state, rig, sensor, search }: Record<string, string | undefined>): ListFilter {
  const given = { state, rigId: rig, sensorId: sensor, search: search?.trim() || undefined };
  const { shape } = campaignQuery;
  const known = (name: keyof typeof given) => (given[name] !== undefined && shape[name].safeParse(given[name]).success ? given[name] : undefined);
  return { state: known("state") as Place | undefined, rigId: known("rigId"), sensorId: known("sensorId"), search: known("search") };
}
