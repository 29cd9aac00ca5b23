import type { Choices } from "@/lib/campaigns/draft-schema";

export type DraftBinding = { port: number | null; lotId: string };

/**
 * A first guess of ports and lots: a slot gets the bottle of the liquid it is named after, else the next bottle that no slot has.
 * What a person bound before stays where it still fits the rig.
 */
export function bindSlots(slots: readonly string[], rig: Choices["rigs"][number], lots: Choices["lots"], before: Readonly<Record<string, DraftBinding>>): Record<string, DraftBinding> {
  const bound: Record<string, DraftBinding> = {};
  const taken = new Set<number>();
  const bind = (slot: string, binding: DraftBinding) => {
    bound[slot] = binding;
    if (binding.port !== null) taken.add(binding.port);
  };
  for (const slot of slots) {
    const kept = Object.hasOwn(before, slot) ? before[slot] : undefined;
    if (kept?.port != null && kept.port <= rig.ports.length && !taken.has(kept.port)) bind(slot, kept);
  }
  const loaded = rig.ports.flatMap(({ number, lotId }) => {
    const lot = lots.find(({ id }) => id === lotId);
    return lot ? [{ port: number, lotId: lot.id, name: lot.liquidName.toLowerCase() }] : [];
  });
  const free = () => loaded.filter(({ port }) => !taken.has(port));
  for (const slot of slots) {
    const named = Object.hasOwn(bound, slot) ? undefined : free().find(({ name }) => name === slot.toLowerCase());
    if (named) bind(slot, { port: named.port, lotId: named.lotId });
  }
  for (const slot of slots) {
    if (Object.hasOwn(bound, slot)) continue;
    const [next] = free();
    bind(slot, next ? { port: next.port, lotId: next.lotId } : { port: null, lotId: "" });
  }
  return bound;
}
