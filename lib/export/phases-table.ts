import { findFitRun } from "@/lib/analysis/select-phases";
import { findPhases } from "@/lib/campaigns/phases";
import type { PhaseItem } from "@/lib/campaigns/answers";
import type { Cell, Column, Table } from "@/lib/export/table";

const COLUMNS: readonly (Column & { of: (phase: PhaseItem, fitRunId: string | undefined) => Cell })[] = [
  { name: "cycle", unit: "", what: "cycle of the protocol", of: (phase) => phase.cycle },
  { name: "sequence", unit: "", what: "number of the step in the campaign", of: (phase) => phase.sequence },
  { name: "phaseId", unit: "", what: "id of the phase", of: (phase) => phase.id },
  { name: "medium", unit: "", what: "air, or the slot of the liquid", of: (phase) => phase.medium },
  { name: "role", unit: "", what: "reference, check or sample", of: (phase) => phase.role },
  { name: "setPointC", unit: "°C", what: "set-point of the cell", of: (phase) => phase.setPointC },
  { name: "mountId", unit: "", what: "mounting of the sensor", of: (phase) => phase.mountId },
  { name: "startedAt", unit: "", what: "first repeat", of: (phase) => phase.startedAt },
  { name: "endedAt", unit: "", what: "last repeat", of: (phase) => phase.endedAt },
  { name: "n", unit: "1", what: "repeats measured", of: (phase) => phase.n },
  { name: "nUsed", unit: "1", what: "repeats in the phase value", of: (phase) => phase.nUsed },
  { name: "f0Hz", unit: "Hz", what: "phase value of the resonance frequency", of: (phase) => phase.f0.mean },
  { name: "f0SdHz", unit: "Hz", what: "standard deviation of its repeats", of: (phase) => phase.f0.sd },
  { name: "f0UHz", unit: "Hz", what: "standard uncertainty of the phase value", of: (phase) => phase.f0.u },
  { name: "q", unit: "1", what: "phase value of the quality factor", of: (phase) => phase.q.mean },
  { name: "qSd", unit: "1", what: "standard deviation of its repeats", of: (phase) => phase.q.sd },
  { name: "qU", unit: "1", what: "standard uncertainty of the phase value", of: (phase) => phase.q.u },
  { name: "temperatureC", unit: "°C", what: "mean cell temperature", of: (phase) => phase.temperatureC.mean },
  { name: "temperatureSdC", unit: "°C", what: "standard deviation of the cell temperature", of: (phase) => phase.temperatureC.sd },
  { name: "flags", unit: "", what: "flags with the number of repeats that carry them", of: (phase) => Object.entries(phase.flags).map(([flag, count]) => `${flag}:${count}`).join(";") },
  { name: "fitRunId", unit: "", what: "fit run behind the values", of: (_, fitRunId) => fitRunId ?? null },
];

/** One row a phase. */
export function phasesTable({ campaignId, fitRunId }: { campaignId: string; fitRunId?: string }): Table {
  async function* rows() {
    const run = await findFitRun(campaignId, fitRunId);
    let cursor: string | undefined;
    do {
      const page = await findPhases({ campaignId, query: { limit: 200, cursor, fitRunId } });
      yield page.items.map((phase) => COLUMNS.map(({ of }) => of(phase, run)));
      cursor = page.nextCursor ?? undefined;
    } while (cursor);
  }
  return { name: "phases", columns: COLUMNS, rows: rows() };
}
