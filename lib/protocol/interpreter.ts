import { next as nextAction } from "./next";
import { redirect as redirectCursor } from "./redirect";
import type { Cursor, Interpreter } from "./types";

/** Where every campaign begins: before the first step, the cell empty. */
function startCursor(): Cursor {
  return {
    sequence: 0,
    cycle: 0,
    cyclesBegun: 0,
    path: [],
    detours: [],
    cell: { content: "air" },
    setPointC: null,
    cleanedAgain: {},
  };
}

const interpreter: Interpreter = { start: startCursor, next: nextAction, redirect: redirectCursor };

/** The three doors of the interpreter, held to the contract in `types.ts`; the rooms behind them are for `lib/protocol` only. */
export const { start, next, redirect } = interpreter;
