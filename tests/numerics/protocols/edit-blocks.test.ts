import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { parseDefinition } from "@/lib/protocol/schema";
import { copyBlock, type Draft, type DraftBlock, readDraft, setAt } from "@/lib/protocols/draft";
import { editDraft, type EditorState } from "@/lib/protocols/edit";
import { blocksAt, findBlock, insertBlock, moveBlock, placeOf, removeBlock, setInBlock } from "@/lib/protocols/edit-blocks";
import { PROTOCOL_EXAMPLES } from "@/lib/protocols/examples";
import { BLOCK_WORDS, type BlockKind, LIMIT_WORDS, type LimitKind, newBlock, newLimit } from "@/lib/protocols/new-block";

const drain = (id: string): DraftBlock => ({ id, kind: "drain" });
const repeat = (id: string, ...blocks: DraftBlock[]): DraftBlock => ({ id, kind: "repeat", times: 2, blocks });
const draftOf = (...blocks: DraftBlock[]): Draft => ({ name: "D", readout: "velocity", blocks, limits: [] });
const counter = () => {
  let n = 0;
  return () => `new-${++n}`;
};

/** `a (b c) d`: ids in the order in which the list is read. */
const written = (blocks: readonly DraftBlock[]): string => blocks.map(({ id, blocks: inner }) => (inner ? `${id}(${written(inner)})` : id)).join(" ");
const idsOf = (blocks: readonly DraftBlock[]): string[] => blocks.flatMap(({ id, blocks: inner = [], measure }) => [id, ...idsOf(inner), ...(measure ? [measure.id] : [])]);

describe("moveBlock", () => {
  const draft = draftOf(drain("a"), repeat("r", drain("b"), drain("c")), drain("d"));
  test.each<[string, "up" | "down", string]>([
    ["a", "up", "a r(b c) d"],
    ["a", "down", "r(a b c) d"],
    ["b", "up", "a b r(c) d"],
    ["b", "down", "a r(c b) d"],
    ["c", "down", "a r(b) c d"],
    ["d", "up", "a r(b c d)"],
    ["d", "down", "a r(b c) d"],
    ["r", "up", "r(b c) a d"],
    ["r", "down", "a d r(b c)"],
    ["nobody", "up", "a r(b c) d"],
  ])("%s %s", (id, direction, expected) => {
    expect(written(moveBlock(draft, id, direction).blocks)).toBe(expected);
  });

  const anyBlocks = fc.letrec<{ blocks: DraftBlock[]; block: DraftBlock }>((tie) => ({
    blocks: fc.array(tie("block"), { minLength: 1, maxLength: 4 }),
    block: fc.oneof({ maxDepth: 4 }, fc.constant<DraftBlock>({ id: "", kind: "drain" }), tie("blocks").map((blocks): DraftBlock => ({ id: "", kind: "repeat", times: 2, blocks }))),
  }));
  const anyDraft = anyBlocks.blocks.map((blocks) => readDraft({ name: "D", blocks, limits: [] }, counter()));

  test("loses no block and no id, whatever is moved, and the other way brings it back", () => {
    fc.assert(
      fc.property(anyDraft, fc.nat(), fc.constantFrom("up" as const, "down" as const), (before, pick, direction) => {
        const ids = idsOf(before.blocks);
        const id = ids[pick % ids.length];
        const after = moveBlock(before, id, direction);
        expect(idsOf(after.blocks).toSorted()).toEqual(ids.toSorted());
        expect(findBlock(after, id)).toEqual(findBlock(before, id));
        if (after !== before) expect(moveBlock(after, id, direction === "up" ? "down" : "up")).toEqual(before);
      }),
    );
  });

  test("walking down from the top, a step comes by every place and ends at the bottom", () => {
    let at = draftOf(drain("x"), repeat("r", drain("b"), repeat("s", drain("c"))), drain("d"));
    const seen = [written(at.blocks)];
    for (let next = moveBlock(at, "x", "down"); next !== at; next = moveBlock(at, "x", "down")) seen.push(written((at = next).blocks));
    expect(seen).toEqual(["x r(b s(c)) d", "r(x b s(c)) d", "r(b x s(c)) d", "r(b s(x c)) d", "r(b s(c x)) d", "r(b s(c) x) d", "r(b s(c)) x d", "r(b s(c)) d x"]);
  });
});

describe("insert, remove, copy and set", () => {
  const draft = draftOf(drain("a"), repeat("r", drain("b")));

  test("a block is put at a place inside a container", () => {
    expect(written(insertBlock(draft, { list: "blocks", inside: "r", index: 1 }, drain("n")).blocks)).toBe("a r(b n)");
  });

  test("what is taken out of parking last takes the list away, so that the definition says nothing of it", () => {
    const parked = insertBlock(draft, { list: "park", inside: null, index: 0 }, drain("p"));
    expect(placeOf(parked, "p")).toEqual({ list: "park", inside: null, index: 0 });
    expect("park" in removeBlock(parked, "p")).toBe(false);
  });

  test("a copy has ids of its own all the way down, and nothing else is new", () => {
    const block = { ...repeat("r", drain("b")), measure: drain("m") };
    const copy = copyBlock(block, counter());
    expect(idsOf([copy])).toEqual(["new-1", "new-2", "new-3"]);
    expect(copy).toMatchObject({ kind: "repeat", times: 2, blocks: [{ kind: "drain" }], measure: { kind: "drain" } });
  });

  test("a field is set in the block of that id only, the check of a cleaning too; others stay the same objects", () => {
    const clean: DraftBlock = { id: "u", kind: "untilClean", blocks: [drain("x")], measure: { id: "m", kind: "measure" } };
    const before = draftOf(drain("a"), clean);
    const after = setInBlock(before, "m", "sweep.points", 41);
    expect(findBlock(after, "m")).toEqual({ id: "m", kind: "measure", sweep: { points: 41 } });
    expect(after.blocks[0]).toBe(before.blocks[0]);
    expect(blocksAt(after, { list: "blocks", inside: "u" })).toBe(clean.blocks);
  });

  test("undefined takes a field away", () => {
    expect(setAt({ a: { b: 1, c: 2 } }, "a.b", undefined)).toEqual({ a: { c: 2 } });
  });
});

describe("editDraft", () => {
  const begun: EditorState = { draft: draftOf(drain("a"), drain("b")), past: [] };

  test("undo goes back edit by edit, and keystrokes in one field are one edit", () => {
    const typed = ["4", "40", "40."].reduce((state, value) => editDraft(state, { do: "set in block", id: "a", path: "volumeMl", value }), begun);
    const moved = editDraft(typed, { do: "move", id: "a", direction: "down" });
    expect(written(editDraft(moved, { do: "undo" }).draft.blocks)).toBe("a b");
    expect(editDraft(editDraft(moved, { do: "undo" }), { do: "undo" }).draft).toBe(begun.draft);
  });

  test("an edit that changes nothing is no step of undo", () => {
    expect(editDraft(begun, { do: "move", id: "a", direction: "up" })).toBe(begun);
    expect(editDraft(begun, { do: "undo" })).toBe(begun);
  });

  test("typing in the same field after an undo is a new edit", () => {
    const type = (state: EditorState, value: number) => editDraft(state, { do: "set", path: "maxAttempts", value });
    const after = type(editDraft(type(begun, 4), { do: "undo" }), 5);
    expect(after.past).toHaveLength(1);
  });

  test("limits are added, changed, replaced and removed by id", () => {
    const added = editDraft(begun, { do: "add limit", limit: { id: "l", kind: "silence", afterS: 60 } });
    const set = editDraft(added, { do: "set in limit", id: "l", path: "afterS", value: 90 });
    expect(set.draft.limits).toEqual([{ id: "l", kind: "silence", afterS: 90 }]);
    expect(editDraft(set, { do: "replace limit", limit: { id: "l", kind: "count" } }).draft.limits).toEqual([{ id: "l", kind: "count" }]);
    expect(editDraft(set, { do: "remove limit", id: "l" }).draft.limits).toEqual([]);
  });
});

describe("readDraft", () => {
  test("takes what anybody may have stored: wrong lists, blocks without ids, ids twice", () => {
    const draft = readDraft({ name: 5, blocks: [{ kind: "drain", id: "a" }, { kind: "drain", id: "a" }, "no block", { kind: "repeat", blocks: "none" }], limits: null, park: [] }, counter());
    expect(draft).toEqual({ name: 5, blocks: [{ kind: "drain", id: "a" }, { kind: "drain", id: "new-1" }, { kind: "repeat", id: "new-2" }], limits: [] });
  });

  test.each(PROTOCOL_EXAMPLES.map(({ definition }) => [definition.name, definition]))("%s comes through it unchanged but for ids", (_, definition) => {
    const parsed = parseDefinition(readDraft(definition, counter()), () => "none");
    expect(parsed.ok && JSON.parse(JSON.stringify(parsed.definition, (key, value: unknown) => (key === "id" ? undefined : value)))).toEqual(
      (() => {
        const own = parseDefinition(definition, counter());
        return own.ok && JSON.parse(JSON.stringify(own.definition, (key, value: unknown) => (key === "id" ? undefined : value)));
      })(),
    );
  });
});

describe("what the editor begins from is valid", () => {
  const base = { name: "D", readout: "velocity", cleaning: [{ kind: "drain" }], blocks: [{ kind: "drain" }] };

  test.each((Object.keys(BLOCK_WORDS) as BlockKind[]).filter((kind) => kind !== "ask"))("a new %s", (kind) => {
    expect(parseDefinition({ ...base, blocks: [newBlock(kind, counter())] }, counter())).toMatchObject({ ok: true });
  });

  test("only a question has to be written first", () => {
    expect(parseDefinition({ ...base, blocks: [newBlock("ask", counter())] }, counter())).toEqual({ ok: false, errors: [{ path: "blocks.0.instruction", message: "This is needed" }] });
  });

  test.each(Object.keys(LIMIT_WORDS) as LimitKind[])("a new %s limit, which keeps what another kind did", (kind) => {
    const limit = newLimit(kind, counter(), { id: "l", kind: "count", does: ["hold", "cleanAgain"] });
    expect(limit).toMatchObject({ id: "l", does: ["hold", "cleanAgain"] });
    expect(parseDefinition({ ...base, limits: [limit] }, counter())).toMatchObject({ ok: true });
  });
});
