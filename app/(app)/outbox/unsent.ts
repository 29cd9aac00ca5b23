import type { KeptAnswer } from "@/lib/tasks/outbox";

/** A call that nothing answered, with the key under which it was tried. */
export type Unsent = Pick<KeptAnswer, "path" | "body" | "key">;
