import { heavy, type Heavy } from "@/lib/analysis/heavy";

export type Asked = { [Name in keyof Heavy]: { id: number; name: Name; input: Parameters<Heavy[Name]>[0] } }[keyof Heavy];

export type Answered = { id: number } & ({ value: unknown } | { error: { name: string; message: string } });

function compute(asked: Asked): unknown {
  return asked.name === "drift" ? heavy.drift(asked.input) : heavy.stability(asked.input);
}

/** The other side of `offLoop`: one computation after the other, until whoever started the process goes. */
process.on("message", (asked: Asked) => {
  let answer: Answered;
  try {
    answer = { id: asked.id, value: compute(asked) };
  } catch (error) {
    answer = { id: asked.id, error: error instanceof Error ? { name: error.name, message: error.message } : { name: "Error", message: String(error) } };
  }
  process.send?.(answer);
});
process.on("disconnect", () => process.exit(0));
