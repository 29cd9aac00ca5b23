import os from "node:os";
import { heavy, type Heavy } from "@/lib/analysis/heavy";

export type Asked = { [Name in keyof Heavy]: { id: number; name: Name; input: Parameters<Heavy[Name]>[0] } }[keyof Heavy];

export type Answered = { id: number } & ({ value: unknown } | { error: { name: string; message: string } });

// Steps for rigs and pages come before plots, also when the machine has no core to spare.
os.setPriority(os.constants.priority.PRIORITY_BELOW_NORMAL);

async function answer(asked: Asked): Promise<Answered> {
  try {
    return { id: asked.id, value: await valueOf(asked) };
  } catch (error) {
    const { name, message } = error instanceof Error ? error : new Error(String(error));
    return { id: asked.id, error: { name, message } };
  }
}

function valueOf(asked: Asked) {
  switch (asked.name) {
    case "drift":
      return heavy.drift(asked.input);
    case "stability":
      return heavy.stability(asked.input);
    case "airReturn":
      return heavy.airReturn(asked.input);
  }
}

let before: Promise<unknown> = Promise.resolve();

/** The other side of `offLoop`: one computation after the other, as each may hold a million repeats, until whoever started the process goes. */
process.on("message", (asked: Asked) => {
  before = before.then(async () => process.send?.(await answer(asked)));
});
process.on("disconnect", () => process.exit(0));
