import { type Definition, parseDefinition } from "@/lib/protocol/schema";

/** Air, one liquid, drain, three times over. */
export function aDefinition(given: Partial<Definition> = {}): Definition {
  const sweep = { centre: "track", span: { halfWidths: 8 }, points: 61, dwell: { ringDowns: 5 }, driveV: 0.1 };
  const parsed = parseDefinition(
    {
      name: "Three fills",
      readout: "velocity",
      blocks: [
        {
          id: "cycles",
          kind: "repeat",
          times: 3,
          blocks: [
            { id: "air", kind: "measure", medium: "air", repeats: 10, sweep },
            { id: "fill", kind: "fill", slot: "sample", volumeMl: 40, flowMlPerMin: 20 },
            { id: "drain", kind: "drain" },
          ],
        },
      ],
    },
    () => "made",
  );
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.errors));
  return { ...parsed.definition, ...given };
}
