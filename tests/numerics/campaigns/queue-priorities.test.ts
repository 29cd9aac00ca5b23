import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { queuePriorities, type InLine } from "@/lib/campaigns/queue-priorities";

const waiting = (id: number, priority: number, minute: number): InLine => ({ id: String(id), priority, queuedAt: new Date(minute * 60_000) });

/** The order in which a rig takes them. */
const inOrder = (line: readonly InLine[]) =>
  line.toSorted((a, b) => b.priority - a.priority || a.queuedAt.getTime() - b.queuedAt.getTime() || Number(a.id) - Number(b.id));

const after = (wanted: readonly InLine[], changes: ReadonlyMap<string, number> | undefined) => inOrder(wanted.map((one) => ({ ...one, priority: changes?.get(one.id) ?? one.priority }))).map(({ id }) => id);

describe("a move changes as few priorities as it can", () => {
  test("to the front of equals only the moved one rises", () => {
    const [a, b, c] = [waiting(1, 0, 1), waiting(2, 0, 2), waiting(3, 0, 3)];
    expect(queuePriorities([c, a, b], "3")).toEqual(new Map([["3", 1]]));
  });

  test("to the end only the moved one sinks", () => {
    const [a, b, c] = [waiting(1, 5, 1), waiting(2, 0, 2), waiting(3, 0, 3)];
    expect(queuePriorities([b, c, a], "1")).toEqual(new Map([["1", -1]]));
  });

  test("between two equals the one before makes room", () => {
    const [a, b, c] = [waiting(1, 0, 1), waiting(2, 0, 2), waiting(3, 0, 3)];
    expect(queuePriorities([a, c, b], "3")).toEqual(new Map([["3", 1], ["1", 1]]));
  });

  test("a line that stands as wanted needs no change", () => {
    expect(queuePriorities([waiting(1, 3, 1), waiting(2, 0, 2)], "2")).toEqual(new Map());
  });
});

test("at the top of the scale all are numbered anew, within it", () => {
  const wanted = [waiting(3, 100, 3), waiting(1, 100, 1), waiting(2, 100, 2)];
  const changes = queuePriorities(wanted, "3");
  expect(after(wanted, changes)).toEqual(["3", "1", "2"]);
  expect(Math.max(...(changes?.values() ?? []))).toBeLessThanOrEqual(100);
});

test("a line that would need more than 201 priorities is refused", () => {
  const backwards = Array.from({ length: 202 }, (_, i) => waiting(i + 1, 100, 1000 - i));
  expect(queuePriorities(backwards, "202")).toBeUndefined();
  expect(queuePriorities(backwards.slice(1), "202")?.size).toBeGreaterThan(0);
});

test("a campaign that is not in the line is an error", () => expect(() => queuePriorities([waiting(1, 0, 1)], "9")).toThrow(RangeError));

test("whatever the line and the move, the rig takes them in the wanted order and every priority is allowed", () => {
  const lines = fc.array(fc.record({ priority: fc.integer({ min: -100, max: 100 }), minute: fc.integer({ min: 0, max: 5 }) }), { minLength: 1, maxLength: 12 });
  fc.assert(
    fc.property(lines, fc.nat(), fc.nat(), (made, from, to) => {
      const line = inOrder(made.map(({ priority, minute }, i) => waiting(i + 1, priority, minute)));
      const moved = line[from % line.length];
      const wanted = line.filter((one) => one !== moved).toSpliced(to % line.length, 0, moved);
      const changes = queuePriorities(wanted, moved.id);
      expect(after(wanted, changes)).toEqual(wanted.map(({ id }) => id));
      for (const priority of changes?.values() ?? []) expect(Math.abs(priority)).toBeLessThanOrEqual(100);
    }),
  );
});
