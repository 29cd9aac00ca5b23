import { useId, type ComponentProps, type ReactNode } from "react";
import { classNames } from "./class-names";

type Frame = {
  label: ReactNode;
  /** Unit and allowed range, under the field: `mV, North bench allows 5 to 40`. */
  hint?: ReactNode;
  /** Says why: `At least 20 ms: below that the wire has not settled.` */
  error?: ReactNode;
  /** Buttons that put it right. */
  repair?: ReactNode;
  className?: string;
};

/** Label above, unit and range under, error sentence with a 2 px ink frame. `children` gets the ids to bind. */
export function Field({ label, hint, error, repair, className, children }: Frame & { children: (bound: { id: string; "aria-describedby"?: string; "aria-invalid"?: true }) => ReactNode }) {
  const id = useId();
  const noteId = `${id}-note`;
  return (
    <div className={classNames("field", className)}>
      <label htmlFor={id}>{label}</label>
      {children({ id, "aria-describedby": hint || error ? noteId : undefined, "aria-invalid": error ? true : undefined })}
      <div id={noteId} aria-live="polite">
        {error ? <span className="error">{error}</span> : hint && <small>{hint}</small>}
      </div>
      {repair && <div className="buttons">{repair}</div>}
    </div>
  );
}

type ControlProps<Tag extends "input" | "select" | "textarea"> = Frame & Omit<ComponentProps<Tag>, keyof Frame | "id">;

/** Spread react-hook-form's `register(name)` into it. */
export function TextField({ label, hint, error, repair, className, ...control }: ControlProps<"input">) {
  return (
    <Field {...{ label, hint, error, repair, className }}>
      {(bound) => <input type="text" {...control} {...bound} className="control" />}
    </Field>
  );
}

/** A number as text: spinners and locale guesses of number inputs lose digits. Register with `valueAsNumber` or coerce in the schema. */
export function NumberField({ label, hint, error, repair, className, ...control }: ControlProps<"input">) {
  return (
    <Field {...{ label, hint, error, repair, className }}>
      {(bound) => <input type="text" inputMode="decimal" autoComplete="off" {...control} {...bound} className="control text-right" />}
    </Field>
  );
}

export function SelectField({ label, hint, error, repair, className, children, ...control }: ControlProps<"select">) {
  return (
    <Field {...{ label, hint, error, repair, className }}>
      {(bound) => <select {...control} {...bound} className="control">{children}</select>}
    </Field>
  );
}

export function TextAreaField({ label, hint, error, repair, className, ...control }: ControlProps<"textarea">) {
  return (
    <Field {...{ label, hint, error, repair, className }}>
      {(bound) => <textarea {...control} {...bound} className="control" />}
    </Field>
  );
}

type OptionProps = Omit<ComponentProps<"input">, "type"> & { type: "radio" | "checkbox"; note?: ReactNode };

/** One row of a list to choose from, with a quiet note at its right. */
export function Option({ type, note, children, ...control }: OptionProps) {
  return (
    <label className="option">
      <input {...control} type={type} className="choice" />
      <span>{children}</span>
      {note && <span className="small ml-auto text-ink2">{note}</span>}
    </label>
  );
}

/** A group of options under one question. */
export function OptionGroup({ legend, hint, error, children }: { legend: ReactNode; hint?: ReactNode; error?: ReactNode; children: ReactNode }) {
  return (
    <fieldset className="field">
      <legend className="field-label mb-1">{legend}</legend>
      {children}
      {error ? <span className="error" role="alert">{error}</span> : hint && <small>{hint}</small>}
    </fieldset>
  );
}
