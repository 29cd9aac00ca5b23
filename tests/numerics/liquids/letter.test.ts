import fc from "fast-check";
import { expect, test } from "vitest";
import { chooseLetter } from "@/lib/liquids/letter";

test.each([
  ["Water", [], "W"],
  ["2-Propanol", [], "P"],
  ["Tarn mix 3", ["T"], "M"],
  ["Öl", [], "O"],
  ["Water", ["W"], "A"],
  ["水", [], "L"],
])("%s, with %j taken, stands under %s", (name, taken, letter) => {
  expect(chooseLetter(name, new Set(taken))).toBe(letter);
});

test("900 liquids of one name all get a letter of their own that the database takes", () => {
  const taken = new Set<string>();
  for (let n = 0; n < 900; n++) {
    const letter = chooseLetter("Water", taken);
    expect(letter).toMatch(/^[A-Z][A-Z0-9]?$/);
    taken.add(letter!);
  }
  expect(taken.size).toBe(900);
});

test("whatever the name, the first letter is one that the database takes", () => {
  fc.assert(fc.property(fc.string(), (name) => /^[A-Z][A-Z0-9]?$/.test(chooseLetter(name, new Set()) ?? "")));
});
