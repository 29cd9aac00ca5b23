import { inject } from "vitest";

export type Mail = { id: string; subject: string; text: string; html: string; to: { address: string }[] };

/** Everything in the laboratory's inbox. */
export async function inbox(): Promise<Mail[]> {
  const answer = await fetch(`${inject("laboratory").inboxUrl}/api/email`);
  if (!answer.ok) throw new Error(`the inbox answered ${answer.status}`);
  return (await answer.json()) as Mail[];
}
