import { liquidFill, type Tint } from "@/components/strip/tint";
import { PhaseChip } from "@/components/ui/phase-chip";
import type { CheckAnswer, Choices } from "@/lib/campaigns/draft-schema";
import { formatVolume, NO_VALUE } from "@/lib/format";
import type { Draft } from "./use-draft";

type SlotsTableProps = { draft: Draft; choices: Choices; checked: CheckAnswer | undefined; onChange: (changes: Partial<Draft>) => void };

export function SlotsTable({ draft, choices: { versions, rigs, lots }, checked, onChange }: SlotsTableProps) {
  const version = versions.find(({ id }) => id === draft.protocolVersionId);
  const rig = rigs.find(({ id }) => id === draft.rigId);
  if (!version || !rig) return <p className="text-ink2">They follow from the protocol and the rig.</p>;
  if (version.slots.length === 0) return <p className="text-ink2">The protocol measures in air only.</p>;
  const bind = (slot: string, changes: Partial<Draft["slots"][string]>) => onChange({ slots: { ...draft.slots, [slot]: { ...draft.slots[slot], ...changes } } });
  /** Whoever had the port before is given another. */
  const takePort = (slot: string, port: number, lotOn: (port: number) => string) => {
    const others = Object.entries(draft.slots).filter(([other, binding]) => other !== slot && binding.port !== port);
    onChange({ slots: { ...Object.fromEntries(others), [slot]: { port: port || null, lotId: lotOn(port) } } });
  };

  return (
    <div className="scroll">
      <table className="data-table">
        <thead>
          <tr>
            <th scope="col">Slot</th>
            <th scope="col">Port</th>
            <th scope="col">Lot</th>
            <th scope="col">Needed of loaded</th>
            <th scope="col" className="right">Needed</th>
            <th scope="col" className="right">Loaded</th>
          </tr>
        </thead>
        <tbody>
          {version.slots.map((slot) => {
            const { port, lotId } = draft.slots[slot] ?? { port: null, lotId: "" };
            const lot = lots.find(({ id }) => id === lotId);
            const amounts = checked?.slots.find((checkedSlot) => checkedSlot.slot === slot);
            const lotOn = (number: number) => rig.ports.find((candidate) => candidate.number === number)?.lotId ?? lotId;
            return (
              <tr key={slot}>
                <td><span className="inline-flex items-center gap-2">{lot && <PhaseChip kind="liquid" letter={lot.letter} tint={lot.tint} />}{slot}</span></td>
                <td>
                  <select className="control min-w-24" aria-label={`Port for ${slot}`} value={port ?? ""} onChange={(event) => takePort(slot, Number(event.target.value), lotOn)}>
                    <option value="">none</option>
                    {rig.ports.map(({ number }) => <option key={number} value={number}>port {number}</option>)}
                  </select>
                </td>
                <td>
                  <select className="control min-w-44" aria-label={`Lot for ${slot}`} value={lotId} onChange={(event) => bind(slot, { lotId: event.target.value })}>
                    <option value="">choose a lot</option>
                    {lots.map(({ id, code, liquidName }) => <option key={id} value={id}>{code}, {liquidName}</option>)}
                  </select>
                </td>
                <td>{amounts && <NeededBar needed={amounts.neededMl} loaded={amounts.loadedMl ?? 0} tint={lot?.tint ?? 1} />}</td>
                <td className="right num">{amounts ? formatVolume(amounts.neededMl) : NO_VALUE}</td>
                <td className="right num">{amounts ? formatVolume(amounts.loadedMl ?? 0) : NO_VALUE}</td>
              </tr>
            );
          })}
        </tbody>
      </table>
    </div>
  );
}

/** Solid: needed and there. Pale: there and left over. Dashed: needed and not there. */
function NeededBar({ needed, loaded, tint }: { needed: number; loaded: number; tint: Tint }) {
  const width = 92;
  const most = Math.max(needed, loaded, 1);
  const x = (ml: number) => (ml / most) * width;
  return (
    <svg width={width} height="14" role="img" aria-label={`${formatVolume(needed)} needed of ${formatVolume(loaded)} loaded`}>
      {loaded > 0 && <rect x=".5" y="2.5" width={Math.max(0, x(loaded) - 1)} height="9" fill="var(--sunk)" stroke="var(--rule3)" />}
      <rect y="2" width={x(Math.min(needed, loaded))} height="10" fill={liquidFill(tint)} />
      {needed > loaded && <rect x={x(loaded)} y="2.5" width={Math.max(0, x(needed - loaded) - 0.5)} height="9" fill="none" stroke="var(--ink)" strokeDasharray="2 2" />}
    </svg>
  );
}
