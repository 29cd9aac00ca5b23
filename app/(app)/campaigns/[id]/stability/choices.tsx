"use client";

import { useQuery } from "@tanstack/react-query";
import { useState, type ReactNode } from "react";
import { PhaseChip } from "@/components/ui/phase-chip";
import { F0, Q } from "@/components/ui/quantity";
import { FLAGS, flagNames, LEFT_OUT } from "@/lib/numerics/resonance/flags";
import { campaignCode, campaignIdOf } from "@/lib/campaigns/code";
import { fitRunsOptions } from "@/lib/fit-runs/client";
import { capitalised } from "@/lib/format";
import { STATISTICS } from "../stability-curves";
import type { AnalysisProps } from "./analysis-screen";
import { BANDS, toggled, type AnalysisView } from "./analysis-view";

type Item = { value: string | null; label: ReactNode; pressed: boolean; note?: ReactNode };

/** A list of choices of the margin; each writes one name of the address. */
export function ChoiceList({ label, name, items, set }: { label: string; name: string; items: readonly Item[]; set: AnalysisProps["set"] }) {
  return (
    <>
      <p className="choices-head">{label}</p>
      <div className="choices" role="group" aria-label={label}>
        {items.map(({ value, label: text, pressed, note }, i) => (
          <button key={i} type="button" aria-pressed={pressed} onClick={() => set({ [name]: value })}>{text}{note && <em>{note}</em>}</button>
        ))}
      </div>
    </>
  );
}

export function QuantityChoice({ view, set, absolute = false }: Pick<AnalysisProps, "view" | "set"> & { absolute?: boolean }) {
  const is = (quantity: AnalysisView["quantity"], normalise: AnalysisView["normalise"]) => view.quantity === quantity && (!absolute || view.normalise === normalise);
  const choose = (quantity: string | null, normalise: string | null) => () => set({ quantity, normalise });
  return (
    <>
      <p className="choices-head">Quantity</p>
      <div className="choices" role="group" aria-label="Quantity">
        <button type="button" aria-pressed={is("f0", "fractional")} onClick={choose(null, null)}><span><F0 />{absolute && ", fractional"}</span></button>
        {absolute && <button type="button" aria-pressed={is("f0", "absolute")} onClick={choose(null, "absolute")}><span><F0 />, in Hz</span></button>}
        <button type="button" aria-pressed={is("q", "fractional")} onClick={choose("q", null)}><span><Q />{absolute && ", fractional"}</span></button>
        {absolute && <button type="button" aria-pressed={is("q", "absolute")} onClick={choose("q", "absolute")}><span><Q />, absolute</span></button>}
      </div>
    </>
  );
}

export const MOST_MEDIA = 4;

export function shownMedia({ campaign: { media }, view }: Pick<AnalysisProps, "campaign" | "view">): AnalysisProps["campaign"]["media"] {
  const chosen = view.media ? media.filter(({ medium }) => view.media?.includes(medium)) : [];
  return chosen.length > 0 ? chosen : media.slice(0, MOST_MEDIA);
}

export function MediaChoice({ campaign, view, set, one = false }: AnalysisProps & { /** Only one may be chosen. */ one?: boolean }) {
  const shown = shownMedia({ campaign, view }).map(({ medium }) => medium);
  const all = campaign.media.map(({ medium }) => medium);
  const isShown = (medium: string) => (one ? shown[0] === medium : shown.includes(medium));
  return (
    <ChoiceList
      label={one ? "Medium" : "Media"}
      name="medium"
      set={set}
      items={campaign.media.map(({ medium, name, letter, tint }) => ({
        value: one ? medium : toggled(shown, medium, all),
        pressed: isShown(medium),
        label: <>{medium === "air" ? <PhaseChip kind="air" /> : letter && tint ? <PhaseChip kind="liquid" letter={letter} tint={tint} /> : null}{medium === "air" ? "Air" : name}</>,
      }))}
    />
  );
}

export function SetPointChoice({ campaign, set, chosen }: AnalysisProps & { chosen: number | undefined }) {
  if (campaign.setPointsC.length < 2) return null;
  return <ChoiceList label="Cell at" name="setPointC" set={set} items={campaign.setPointsC.map((c) => ({ value: String(c), pressed: chosen === c, label: `${c}\u202f°C` }))} />;
}

export function StatisticChoice({ view, set }: AnalysisProps) {
  const statistics = Object.entries(STATISTICS).map(([value, { label }]) => ({ value: value === "oadev" ? null : value, label: capitalised(label), pressed: view.statistic === value }));
  const taus = [["octave", "Octaves"], ["decade", "1, 2, 4 a decade"], ["all", "All"]] as const;
  const points = [["both", "Within and across"], ["within", "Within phases"], ["phases", "From phase to phase"]] as const;
  return (
    <>
      <ChoiceList label="View" name="points" set={set} items={points.map(([value, label]) => ({ value: value === "both" ? null : value, label, pressed: view.points === value }))} />
      <ChoiceList label="Statistic" name="statistic" set={set} items={statistics} />
      <ChoiceList label="Averaging times" name="taus" set={set} items={taus.map(([value, label]) => ({ value: value === "octave" ? null : value, label, pressed: view.taus === value }))} />
      <ChoiceList label="Band" name="confidence" set={set} items={BANDS.map((value) => ({ value: value === "0.683" ? null : value, label: `${Math.round(Number(value) * 100)} %`, pressed: view.confidence === value }))} />
    </>
  );
}

export function CompensationChoice({ view, set }: Pick<AnalysisProps, "view" | "set">) {
  return (
    <ChoiceList
      label="Temperature"
      name="compensate"
      set={set}
      items={[{ value: null, label: "As measured", pressed: view.compensate === "none" }, { value: "temperature", label: "Compensated", pressed: view.compensate === "temperature" }]}
    />
  );
}

const USUAL = flagNames(LEFT_OUT);

/** Which flags leave a repeat out: pressed is left out. */
export function FlagChoice({ view, set }: AnalysisProps) {
  const out: readonly string[] = view.leaveOut === undefined ? USUAL : view.leaveOut.split(",");
  const next = (flag: string) => {
    const list = FLAGS.filter((one) => (one === flag ? !out.includes(one) : out.includes(one)));
    return list.join(",") === USUAL.join(",") ? null : list.join(",") || "none";
  };
  return <ChoiceList label="Leave out repeats flagged" name="leaveOut" set={set} items={FLAGS.map((flag) => ({ value: next(flag), label: flag, pressed: out.includes(flag) }))} />;
}

export function DeadTimeChoice({ view, set }: AnalysisProps) {
  return (
    <ChoiceList
      label="Pauses between repeats"
      name="deadTime"
      set={set}
      items={[{ value: null, label: "Stated", pressed: view.deadTime === "stated" }, { value: "corrected", label: "Corrected for", pressed: view.deadTime === "corrected" }]}
    />
  );
}

export function FitRunChoice({ campaign, view, set }: AnalysisProps) {
  const { data } = useQuery(fitRunsOptions(campaign.id));
  const runs = data?.items.filter(({ state }) => state === "ready") ?? [];
  if (runs.length < 2) return null;
  const current = runs.find((run) => run.current)?.id;
  return (
    <ChoiceList
      label="Fit run"
      name="fitRunId"
      set={set}
      items={runs.map(({ id, current: isCurrent }) => ({ value: isCurrent ? null : id, label: `Fit run ${id}`, note: isCurrent ? "current" : undefined, pressed: (view.fitRunId ?? current) === id }))}
    />
  );
}

/** Cycles and another campaign, typed: they take effect with Enter or when left. */
export function TypedChoices({ view, set, beside = false }: Pick<AnalysisProps, "view" | "set"> & { beside?: boolean }) {
  const besideText = view.beside ? `${campaignCode(view.beside.campaignId)}${view.beside.medium === "air" ? "" : `:${view.beside.medium}`}` : "";
  return (
    <>
      <Typed key={view.cycles} label="Cycles" hint="all, or 1-20" value={view.cycles ?? ""} valid={(text) => /^\d{1,7}(-\d{1,7})?$/.test(text)} onDone={(text) => set({ cycles: text || null })} />
      {beside && <Typed key={besideText} label="Another campaign beside it" hint="C-102 or C-102:W" value={besideText} valid={(text) => campaignIdOf(text.split(":")[0]) !== undefined} onDone={(text) => set({ with: text ? text.replace(/^(\d)/, "C-$1") : null })} />}
    </>
  );
}

type TypedProps = { label: string; hint: string; value: string; valid: (text: string) => boolean; onDone: (text: string) => void };

function Typed({ label, hint, value, valid, onDone }: TypedProps) {
  const [text, setText] = useState(value);
  const given = text.trim();
  const wrong = given !== "" && !valid(given);
  const done = () => !wrong && given !== value && onDone(given);
  return (
    <label className="my-3 block">
      <span className="choices-head block">{label}</span>
      <input className="control mt-1 w-full" value={text} placeholder={hint} aria-invalid={wrong || undefined} onChange={(event) => setText(event.target.value)} onBlur={done} onKeyDown={(event) => event.key === "Enter" && done()} />
      {wrong && <span className="small">Write {hint}.</span>}
    </label>
  );
}
