"use client";

import { at } from "@/lib/protocol/sentence";
import { useFields } from "./editor-context";
import { SweepFields } from "./sweep-fields";
import { DurationInput, ListInput, NumberInput, SelectInput, TextAreaInput, TextInput } from "./typed-fields";

/** The fields of one block, by its kind. `isCheck`: the air check of an `untilClean`, whose medium and role are given. */
export function BlockFields({ kind, isCheck }: { kind: string; isCheck: boolean }) {
  switch (kind) {
    case "measure":
      return <MeasureFields isCheck={isCheck} />;
    case "fill":
      return <><SlotInput /><NumberInput path="volumeMl" label="Volume" hint="mL" /><NumberInput path="flowMlPerMin" label="Flow" hint="mL/min" /></>;
    case "rinse":
      return <><SlotInput /><NumberInput path="volumeMl" label="Volume" hint="mL each time" /><NumberInput path="times" label="Times" hint="1 to 100" /></>;
    case "dry":
      return <><DurationInput path="seconds" label="For" /><NumberInput path="flowMlPerMin" label="Flow" hint="mL/min; may be left out" /></>;
    case "settle":
      return <SettleFields />;
    case "wait":
      return <WaitFields />;
    case "ask":
      return (
        <>
          <TextAreaInput path="instruction" label="Instruction" hint="What the operator is to do or to look at" className="whole" />
          <SelectInput path="urgency" label="Urgency" options={["low", "normal", "high"].map((value) => ({ value, label: value }))} />
        </>
      );
    case "repeat":
      return <RepeatFields />;
    case "untilClean":
      return (
        <>
          <NumberInput path="tolerancePpm" label="Back within" hint="ppm of the air reference" />
          <NumberInput path="toleranceQPercent" label="and in Q within" hint="%; may be left out" />
          <NumberInput path="maxTimes" label="At most" hint="times, 1 to 100" />
          <SelectInput
            path="otherwise"
            label="Otherwise"
            options={[{ value: "hold", label: "hold" }, { value: "continue", label: "go on" }, { value: "stop", label: "stop" }]}
          />
        </>
      );
    case "forEach":
      return <ForEachFields />;
    default:
      return <p className="whole text-ink2">There is nothing to set.</p>;
  }
}

function SlotInput() {
  const { slots } = useFields();
  return <TextInput path="slot" label="Slot" hint="a name, or each in For each" suggestions={[...slots, "each"]} />;
}

function MeasureFields({ isCheck }: { isCheck: boolean }) {
  const { values, slots } = useFields();
  const usual = values.medium === "air" ? "reference" : "sample";
  return (
    <>
      {!isCheck && <TextInput path="medium" label="In" hint="air, a slot, or each" suggestions={["air", ...slots, "each"]} />}
      {!isCheck && (
        <SelectInput
          path="role"
          label="As"
          options={[{ value: "", label: `usual: ${usual}` }, { value: "reference", label: "reference" }, { value: "check", label: "check" }, { value: "sample", label: "sample" }]}
        />
      )}
      <NumberInput path="repeats" label="Repeats" hint="1 to 100 000" />
      <NumberInput path="discard" label="Leave out" hint="of the first repeats" />
      <DurationInput path="pauseS" label="Pause between" />
      <TextInput path="label" label="Called" hint="may be left out" />
      <SweepFields />
    </>
  );
}

function SettleFields() {
  const { values, set } = useFields();
  const isEach = values.temperatureC === "each";
  return (
    <>
      <SelectInput
        path="temperatureC"
        label="At"
        chosen={isEach ? "each" : "fixed"}
        options={[{ value: "fixed", label: "a temperature" }, { value: "each", label: "each temperature of For each" }]}
        write={(how) => set("temperatureC", how === "each" ? "each" : 25)}
      />
      {!isEach && <NumberInput path="temperatureC" label="Temperature" hint="°C" />}
      <NumberInput path="toleranceC" label="Within" hint="°C" />
      <DurationInput path="holdS" label="For" />
      <DurationInput path="timeoutS" label="At most" />
    </>
  );
}

const WEEKDAYS = ["Monday", "Tuesday", "Wednesday", "Thursday", "Friday", "Saturday", "Sunday"];

function WaitFields() {
  const { values, set } = useFields();
  const isUntil = values.until !== undefined;
  const weekday = at(values, "until.weekday");
  return (
    <>
      <SelectInput
        path={isUntil ? "until" : "seconds"}
        label="Wait"
        chosen={isUntil ? "until" : "seconds"}
        options={[{ value: "seconds", label: "a time" }, { value: "until", label: "until a time of day" }]}
        write={(how) => {
          set("seconds", how === "until" ? undefined : 600);
          set("until", how === "until" ? { time: "06:00" } : undefined);
        }}
      />
      {isUntil ? (
        <>
          <SelectInput
            path="until.weekday"
            label="Day"
            chosen={typeof weekday === "number" ? String(weekday) : ""}
            options={[{ value: "", label: "the next day or today" }, ...WEEKDAYS.map((label, index) => ({ value: String(index + 1), label }))]}
            write={(day) => set("until.weekday", day === "" ? undefined : Number(day))}
          />
          <TextInput keepsEmpty path="until.time" label="Time" hint="HH:MM, local to the rig" />
        </>
      ) : (
        <DurationInput path="seconds" label="For" />
      )}
    </>
  );
}

function RepeatFields() {
  const { values, set } = useFields();
  const isUntil = values.until !== undefined;
  return (
    <>
      <SelectInput
        path={isUntil ? "until" : "times"}
        label="Repeat"
        chosen={isUntil ? "until" : "times"}
        options={[{ value: "times", label: "some times" }, { value: "until", label: "until a date" }]}
        write={(how) => {
          set("times", how === "until" ? undefined : 10);
          set("until", how === "until" ? "" : undefined);
        }}
      />
      {isUntil ? <TextInput keepsEmpty path="until" label="Until" hint="YYYY-MM-DD, to the end of that day" /> : <NumberInput path="times" label="Times" hint="1 to 100 000 000" />}
    </>
  );
}

function ForEachFields() {
  const { values, set } = useFields();
  const isSlots = at(values, "over.slots") !== undefined;
  return (
    <>
      <SelectInput
        path="over"
        label="Of these"
        chosen={isSlots ? "slots" : "temperaturesC"}
        options={[{ value: "temperaturesC", label: "temperatures" }, { value: "slots", label: "slots" }]}
        write={(what) => set("over", what === "slots" ? { slots: ["liquid 1", "liquid 2"] } : { temperaturesC: [20, 25, 30] })}
      />
      {isSlots ? (
        <ListInput key="slots" of="names" path="over.slots" label="Slots" hint="names with commas between; inside, each stands for them" className="whole" />
      ) : (
        <ListInput key="temperatures" of="numbers" path="over.temperaturesC" label="Temperatures" hint="°C, with commas between; inside, each stands for them" className="whole" />
      )}
    </>
  );
}
