import { idSchema } from "@/lib/http/ids";

/** A campaign as people name it and as its address has it: `C-118`. */
export const campaignCode = (campaignId: string): string => `C-${campaignId}`;

/** The id in a part of an address, `C-118` or the bare number; undefined when it is neither. */
export function campaignIdOf(part: string): string | undefined {
  const id = idSchema.safeParse(part.replace(/^C-/i, ""));
  return id.success ? id.data : undefined;
}
