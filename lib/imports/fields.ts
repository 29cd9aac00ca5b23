/** What a column of a file can be, with the units that it may be in; the first is ours. Pure: the browser's preview and the import read the same table. */

type Unit = {
  name: string;
  /** Our unit from the file's; `f0Hz` where a value is told relative to the frequency of its row. */
  to: (value: number, f0Hz: number) => number;
};

export type FieldInfo = {
  words: string;
  units: readonly Unit[];
  /** In our unit. */
  least?: number;
  most?: number;
  /** Names of columns that are taken for this field, in small letters without blanks and signs. */
  names: readonly string[];
};

const same = (value: number): number => value;
const times = (factor: number) => (value: number): number => value * factor;

const FREQUENCY: readonly Unit[] = [
  { name: "Hz", to: same },
  { name: "kHz", to: (value) => value * 1e3 },
  { name: "MHz", to: (value) => value * 1e6 },
  { name: "mHz", to: (value) => value / 1e3 },
];

const VOLTAGE: readonly Unit[] = [
  { name: "V", to: same },
  { name: "mV", to: (value) => value / 1e3 },
  { name: "µV", to: (value) => value / 1e6 },
];

const TEMPERATURE: readonly Unit[] = [
  { name: "°C", to: same },
  { name: "K", to: (value) => value - 273.15 },
  { name: "°F", to: (value) => ((value - 32) * 5) / 9 },
];

const NONE: readonly Unit[] = [{ name: "1", to: same }];

export const FIELDS = {
  takenAt: { words: "Time", units: NONE, names: ["takenat", "time", "timestamp", "datetime", "date", "zeit", "datum", "t"] },
  timeOfDay: { words: "Time of day, beside a date", units: NONE, names: ["timeofday", "clock", "uhrzeit"] },
  medium: { words: "Medium", units: NONE, names: ["medium", "liquid", "fluid", "sample"] },
  cycle: { words: "Cycle", units: NONE, least: 0, most: 1_000_000_000, names: ["cycle", "cyclenumber", "run", "zyklus"] },
  f0Hz: {
    words: "Resonance frequency f₀",
    units: [...FREQUENCY, { name: "s (period)", to: (value) => 1 / value }, { name: "ms (period)", to: (value) => 1e3 / value }, { name: "µs (period)", to: (value) => 1e6 / value }],
    least: Number.MIN_VALUE,
    most: 1e12,
    names: ["f0hz", "f0", "fres", "fr", "frequency", "freq", "resonance", "resonancefrequency", "f"],
  },
  q: {
    words: "Quality factor Q",
    units: [
      { name: "1", to: same },
      { name: "1/Q", to: (value) => 1 / value },
      { name: "1/Q in ppm", to: (value) => 1e6 / value },
      { name: "damping ratio", to: (value) => 0.5 / value },
      { name: "Hz (bandwidth)", to: (value, f0Hz) => f0Hz / value },
    ],
    least: Number.MIN_VALUE,
    most: 1e12,
    names: ["q", "qfactor", "qualityfactor", "quality", "guete", "güte"],
  },
  temperatureC: { words: "Temperature", units: TEMPERATURE, least: -273.15, most: 5000, names: ["temperaturec", "temperature", "temp", "tcell", "temperatur"] },
  setPointC: { words: "Set-point of the temperature", units: TEMPERATURE, least: -273.15, most: 5000, names: ["setpointc", "setpoint", "tset", "sollwert"] },
  pressurePa: {
    words: "Pressure",
    units: [{ name: "Pa", to: same }, { name: "hPa", to: times(100) }, { name: "mbar", to: times(100) }, { name: "kPa", to: times(1e3) }, { name: "bar", to: times(1e5) }],
    least: 0,
    most: 1e12,
    names: ["pressurepa", "pressure", "p", "druck"],
  },
  humidityPercent: { words: "Relative humidity", units: [{ name: "%", to: same }, { name: "1", to: times(100) }], least: 0, most: 100, names: ["humiditypercent", "humidity", "rh"] },
  f0StdHz: {
    words: "Standard deviation of f₀",
    units: [...FREQUENCY, { name: "ppm", to: (value, f0Hz) => value * 1e-6 * f0Hz }],
    least: 0,
    most: 1e12,
    names: ["f0stdhz", "f0std", "sigmaf0", "uf0"],
  },
  qStd: { words: "Standard deviation of Q", units: NONE, least: 0, most: 1e12, names: ["qstd", "sigmaq", "uq"] },
  amplitudeV: { words: "Amplitude", units: VOLTAGE, least: -1e12, most: 1e12, names: ["amplitudev", "amplitude"] },
  frequencyHz: { words: "Frequency of a point of a sweep", units: FREQUENCY, least: Number.MIN_VALUE, most: 1e12, names: ["frequencyhz"] },
  startHz: { words: "First frequency of a sweep", units: FREQUENCY, least: Number.MIN_VALUE, most: 1e12, names: ["starthz"] },
  stopHz: { words: "Last frequency of a sweep", units: FREQUENCY, least: Number.MIN_VALUE, most: 1e12, names: ["stophz"] },
  re: { words: "In-phase, real part", units: VOLTAGE, names: ["re", "x", "inphase", "real"] },
  im: { words: "Quadrature, imaginary part", units: VOLTAGE, names: ["im", "y", "quadrature", "imag"] },
  magnitude: { words: "Magnitude", units: VOLTAGE, names: ["magnitude", "r"] },
} as const satisfies Record<string, FieldInfo>;

export type Field = keyof typeof FIELDS;

export const FIELD_NAMES = Object.keys(FIELDS) as Field[];

export const fieldInfo = (field: Field): FieldInfo => FIELDS[field];

/** @throws RangeError for a unit that the field cannot be in. */
export function unitOf(field: Field, name = fieldInfo(field).units[0].name): Unit {
  const unit = fieldInfo(field).units.find((one) => one.name === name);
  if (!unit) throw new RangeError(`${field} cannot be in ${name}`);
  return unit;
}
