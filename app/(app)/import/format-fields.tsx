import { SelectField, TextField } from "@/components/ui/field";
import { formatSchema, type Format } from "@/lib/imports/schema";
import { TIME_FORMATS, type TimeFormat } from "@/lib/imports/parse-time";

type Props = { format: Format; onFormat: (format: Format) => void; needsMedium: boolean; raw: boolean };

const whole = (text: string): number | undefined => (/^\d{1,4}$/.test(text.trim()) && Number(text) > 0 ? Number(text) : undefined);

/** How the file is written. What can be found from the file itself is found, unless a person says otherwise. */
export function FormatFields({ format, onFormat, needsMedium, raw }: Props) {
  const set = (change: Partial<Format>) => onFormat({ ...format, ...change });
  const zones = Intl.supportedValuesOf("timeZone");
  const zoneError = formatSchema.shape.timeZone.safeParse(format.timeZone).error?.issues[0]?.message;
  return (
    <div className="grid max-w-[60em] gap-4 sm:grid-cols-2 lg:grid-cols-3">
      <SelectField label="Times are written as" value={format.timeFormat} onChange={({ target }) => set({ timeFormat: target.value as TimeFormat })}>
        {Object.entries(TIME_FORMATS).map(([name, words]) => <option key={name} value={name}>{words}</option>)}
      </SelectField>
      <TextField label="Time zone" hint="Of times without an offset" list="zones" error={zoneError} value={format.timeZone} onChange={({ target }) => set({ timeZone: target.value })} />
      <datalist id="zones">{["UTC", ...zones].map((zone) => <option key={zone} value={zone} />)}</datalist>
      <SelectField label="Decimal sign" value={format.decimal} onChange={({ target }) => set({ decimal: target.value as Format["decimal"] })}>
        <option value=".">Point: 2400.5</option>
        <option value=",">Comma: 2400,5</option>
      </SelectField>
      <SelectField label="Columns are parted by" value={format.delimiter ?? ""} onChange={({ target }) => set({ delimiter: (target.value || undefined) as Format["delimiter"] })}>
        <option value="">what the file shows</option>
        <option value=",">commas</option>
        <option value=";">semicolons</option>
        <option value={"\t"}>tabs</option>
        <option value="|">vertical bars</option>
      </SelectField>
      <TextField label="Line with the names of columns" hint="The first line unless it is blank or begins with #" inputMode="numeric" value={format.headerLine ?? ""} onChange={({ target }) => set({ headerLine: whole(target.value) })} />
      <TextField label="First line with values" hint="Where units or remarks stand between" inputMode="numeric" value={format.firstLine ?? ""} onChange={({ target }) => set({ firstLine: whole(target.value) })} />
      {needsMedium && <TextField label="Medium of all rows" hint="No column names it; air is the reference" value={format.medium ?? ""} onChange={({ target }) => set({ medium: target.value.trim() || undefined })} />}
      {raw ? (
        <SelectField label="Sweeps were read as" value={format.readout ?? ""} onChange={({ target }) => set({ readout: (target.value || undefined) as Format["readout"] })}>
          <option value="">the sensor is, else velocity</option>
          <option value="velocity">velocity</option>
          <option value="displacement">displacement</option>
        </SelectField>
      ) : (
        <SelectField label="A row without f₀ or Q" value={format.gaps} onChange={({ target }) => set({ gaps: target.value as Format["gaps"] })}>
          <option value="refuse">is a mistake in the file</option>
          <option value="keep">is a failed repeat</option>
        </SelectField>
      )}
    </div>
  );
}
