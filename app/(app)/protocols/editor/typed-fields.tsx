"use client";

import { useId, useState, type ReactNode } from "react";
import { classNames } from "@/components/ui/class-names";
import { Field } from "@/components/ui/field";
import { at } from "@/lib/protocol/sentence";
import { parseDuration, showDuration } from "@/lib/protocols/typed-duration";
import { useFields } from "./editor-context";

type FieldProps = { path: string; label: ReactNode; hint?: ReactNode; className?: string };

/** The mistake at a field or at a part of it. */
function useField(path: string) {
  const { values, errors, set } = useFields();
  const own = errors.get(path) ?? [...errors].find(([field]) => field.startsWith(`${path}.`))?.[1];
  return { value: at(values, path), error: own && `${own}.`, set: (value: unknown) => set(path, value) };
}

type TypedProps = FieldProps & { parse: (typed: string) => unknown; show: (value: unknown) => string; align?: "right"; inputMode?: "decimal"; list?: string };

/** Text that stands for a value: as typed while it means the present value, else written anew (after an undo). */
function TypedField({ path, label, hint, className, parse, show, align, inputMode, list }: TypedProps) {
  const { value, error, set } = useField(path);
  const [typed, setTyped] = useState(() => show(value));
  const text = JSON.stringify(parse(typed)) === JSON.stringify(value) ? typed : show(value);
  return (
    <Field label={label} hint={hint} error={error} className={className}>
      {(bound) => (
        <input
          {...bound}
          type="text"
          inputMode={inputMode}
          autoComplete="off"
          list={list}
          data-field={path}
          className={classNames("control", align === "right" && "text-right")}
          value={text}
          onChange={(event) => {
            setTyped(event.target.value);
            set(parse(event.target.value));
          }}
          onBlur={() => setTyped(show(value))}
        />
      )}
    </Field>
  );
}

export const NumberInput = (props: FieldProps) => <TypedField {...props} parse={parseNumber} show={plainText} align="right" inputMode="decimal" />;

/** Seconds, typed as `90 s`, `10 min` or `1 h 30 min`. */
export const DurationInput = (props: FieldProps) => <TypedField {...props} parse={parseDuration} show={showDuration} align="right" hint={props.hint ?? "such as 90 s, 10 min, 2 h"} />;

/** `keepsEmpty`: the field says what the block is, so that it stays when nothing stands in it. */
export function TextInput({ suggestions, keepsEmpty, ...props }: FieldProps & { suggestions?: readonly string[]; keepsEmpty?: boolean }) {
  const id = useId();
  return (
    <>
      <TypedField {...props} parse={keepsEmpty ? (typed) => typed.trim() : parseText} show={plainText} list={suggestions && id} />
      {suggestions && <datalist id={id}>{suggestions.map((suggestion) => <option key={suggestion} value={suggestion} />)}</datalist>}
    </>
  );
}

/** Several values with commas between. */
export const ListInput = ({ of, ...props }: FieldProps & { of: "names" | "numbers" }) => (
  <TypedField {...props} parse={(typed) => parseList(typed, of)} show={(value) => (Array.isArray(value) ? value.map(String).join(", ") : plainText(value))} />
);

export function TextAreaInput({ path, label, hint, className }: FieldProps) {
  const { value, error, set } = useField(path);
  return (
    <Field label={label} hint={hint} error={error} className={className}>
      {(bound) => <textarea {...bound} className="control" data-field={path} value={plainText(value)} onChange={(event) => set(event.target.value)} />}
    </Field>
  );
}

type Choice = { value: string; label: string };

/** One of several; `write` says what a choice stores where that is not the word itself. */
export function SelectInput({ path, label, hint, className, options, chosen, write }: FieldProps & { options: readonly Choice[]; chosen?: string; write?: (value: string) => void }) {
  const { value, error, set } = useField(path);
  const shown = chosen ?? plainText(value);
  return (
    <Field label={label} hint={hint} error={error} className={className}>
      {(bound) => (
        <select {...bound} className="control" data-field={path} value={shown} onChange={(event) => (write ?? ((picked) => set(picked === "" ? undefined : picked)))(event.target.value)}>
          {options.every((option) => option.value !== shown) && <option value={shown}>{shown || "Choose"}</option>}
          {options.map((option) => <option key={option.value} value={option.value}>{option.label}</option>)}
        </select>
      )}
    </Field>
  );
}

/** Which of the values stand in a list. */
export function ChecksInput({ path, label, options }: FieldProps & { options: readonly Choice[] }) {
  const { value, error, set } = useField(path);
  const chosen: readonly unknown[] = Array.isArray(value) ? value : [];
  return (
    <fieldset className="field">
      <legend className="field-label mb-1">{label}</legend>
      <div className="checks">
        {options.map((option) => (
          <label key={option.value}>
            <input
              type="checkbox"
              className="choice"
              data-field={path}
              checked={chosen.includes(option.value)}
              onChange={(event) => set(event.target.checked ? [...chosen, option.value] : chosen.filter((one) => one !== option.value))}
            />
            {option.label}
          </label>
        ))}
      </div>
      {error && <span className="error" role="alert">{error}</span>}
    </fieldset>
  );
}

const plainText = (value: unknown): string => (typeof value === "string" ? value : typeof value === "number" ? String(value) : "");
const parseText = (typed: string): string | undefined => (typed.trim() === "" ? undefined : typed.trim());

function parseNumber(typed: string): number | string | undefined {
  const text = typed.replaceAll(/[\s\u2009\u00a0]/g, "").replace("\u2212", "-").replace(",", ".");
  if (text === "") return undefined;
  return Number.isFinite(Number(text)) ? Number(text) : typed;
}

function parseList(typed: string, of: "names" | "numbers"): unknown[] {
  const parts = typed.split(of === "names" ? "," : /[;,\s]+/).map((part) => part.trim()).filter((part) => part !== "");
  return of === "names" ? parts : parts.map((part) => parseNumber(part));
}
