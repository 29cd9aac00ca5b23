import { at, count, type LooseFields, plain } from "@/lib/protocol/sentence";

/** What stands at the closing repeat sign. */
export function repeatFoot(given: object): string {
  const block: LooseFields = { ...given };
  switch (block.kind) {
    case "repeat":
      return block.until === undefined ? `back to the first of these, ${count(block.times, "time")} in all` : `back to the first of these until ${plain(block.until)} is over`;
    case "untilClean":
      return `clean again if need be, at most ${count(block.maxTimes, "time")} in all`;
    default: {
      const values = at(block, "over.slots") ?? at(block, "over.temperaturesC");
      return `next of the ${Array.isArray(values) ? values.length : 0}`;
    }
  }
}
