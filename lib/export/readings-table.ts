import type { Column, Table } from "@/lib/export/table";
import { COLUMNS, plainReading, readingBatches } from "@/lib/readings/stream";

type Name = (typeof COLUMNS)[number];

const MEANING: Readonly<Record<Name, readonly [unit: string, what: string]>> = {
  cycle: ["", "cycle of the protocol"],
  sequence: ["", "number of the step in the campaign"],
  phaseId: ["", "id of the phase"],
  index: ["", "number of the repeat in its step, from 0"],
  takenAt: ["", "time of the reading, by the rig's clock"],
  medium: ["", "air, or the slot of the liquid"],
  liquid: ["", "name of the liquid"],
  setPointC: ["°C", "set-point of the cell"],
  temperatureC: ["°C", "cell temperature"],
  pressurePa: ["Pa", "air pressure"],
  humidityPercent: ["%", "relative humidity"],
  f0Hz: ["Hz", "resonance frequency"],
  f0StdHz: ["Hz", "its standard error in the fit"],
  q: ["1", "quality factor"],
  qStd: ["1", "its standard error in the fit"],
  amplitudeV: ["V", "resonance term at the resonance frequency"],
  flags: ["", "flags, joined by a semicolon"],
  excluded: ["", "left out by a person"],
  fitRunId: ["", "fit run behind the values"],
};

/** One row a reading. */
export function readingsTable({ campaignId, fitRunId }: { campaignId: string; fitRunId?: string }): Table {
  const columns: Column[] = COLUMNS.map((name) => ({ name, unit: MEANING[name][0], what: MEANING[name][1] }));
  async function* rows() {
    for await (const batch of readingBatches(campaignId, {}, fitRunId)) {
      yield batch.map((reading) => {
        const plain = plainReading(reading);
        return COLUMNS.map((name) => plain[name]);
      });
    }
  }
  return { name: "readings", columns, rows: rows() };
}
