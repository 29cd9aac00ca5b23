import { expect, test } from "vitest";
import { stateWord } from "@/lib/campaigns/state-word";

test.each([
  [["person"], "Paused"],
  [["takeOver"], "Paused"],
  [["setAside"], "Paused"],
  [["task"], "Waiting"],
  [["limit"], "Halted"],
  [["failure"], "Halted"],
  [["silence"], "Halted"],
  [["person", "task"], "Waiting"],
  [["task", "limit", "person"], "Halted"],
] as const)("held for %j reads %s", (reasons, word) => {
  expect(stateWord("held", reasons)).toBe(word);
});

test("a state without holds has its own word", () => {
  expect([stateWord("running"), stateWord("stopped"), stateWord("queued")]).toEqual(["Measuring", "Stopped early", "Queued"]);
});
