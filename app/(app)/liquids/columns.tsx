import Link from "next/link";
import type { TableColumn } from "@/components/ui/data-table";
import { PhaseChip } from "@/components/ui/phase-chip";
import { Symbol } from "@/components/ui/quantity";
import { formatNumber, NO_VALUE } from "@/lib/format";
import { modelWords } from "@/lib/liquids/model-words";
import type { LiquidAnswer } from "@/lib/liquids/schema";

export const COLUMNS: readonly TableColumn<LiquidAnswer>[] = [
  {
    id: "name",
    head: "Liquid",
    slot: "a",
    cell: ({ id, name, letter, tint }) => (
      <span className="inline-flex items-center gap-2">
        <PhaseChip kind="liquid" letter={letter} tint={tint} />
        <Link href={`/liquids/${id}`} className="font-semibold">{name}</Link>
      </span>
    ),
  },
  { id: "model", head: "Model", slot: "c", cell: (liquid) => modelWords(liquid) },
  { id: "density", head: <><Symbol name="ρ" /> at 20 °C / kg/m³</>, slot: "b", align: "right", cell: ({ at20C }) => (at20C ? formatNumber(at20C.densityKgM3, { decimals: 2 }) : NO_VALUE) },
  { id: "viscosity", head: <><Symbol name="η" /> at 20 °C / mPa·s</>, slot: "d", align: "right", cell: ({ at20C }) => (at20C ? formatNumber(at20C.viscosityMPaS, { decimals: 3 }) : NO_VALUE) },
  { id: "hazards", head: "Hazards", slot: "x", cell: ({ hazards }) => hazards.statements.map(({ code, hazardClass }) => hazardClass ?? code).join("; ") || NO_VALUE },
  { id: "lots", head: "Lots", slot: "x", align: "right", cell: ({ lots }) => lots },
  { id: "loaded", head: "On ports", slot: "x", align: "right", cell: ({ loadedOn }) => loadedOn },
];
