import type { TaskAnswer } from "@/lib/tasks/schema";

const firstOf = (instruction: string): string => instruction.split(/(?<=\.)\s|: /, 1)[0];

/** The first sentence, with the rig where it does not name it. */
export function headOf({ instruction, rig }: Pick<TaskAnswer, "instruction" | "rig">): string {
  const head = firstOf(instruction).replace(/\.$/, "");
  return head.includes(rig) ? head : `${head}, ${rig}`;
}

/** What the instruction says after its first sentence, and which campaign waits. */
export function restOf({ instruction, campaign, holds }: Pick<TaskAnswer, "instruction" | "campaign" | "holds">): string {
  const rest = instruction.slice(firstOf(instruction).length).replace(/^[:.\s]+/, "");
  const said = rest && `${rest.charAt(0).toUpperCase()}${rest.slice(1)}`;
  return [said, campaign && (holds ? `${campaign} waits for it.` : `For ${campaign}.`)].filter(Boolean).join(" ");
}
