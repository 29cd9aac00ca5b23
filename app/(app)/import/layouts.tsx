/** The three layouts of a file, by the names of their columns; those of other names are told apart under Columns. */
export function Layouts() {
  return (
    <details>
      <summary>Layouts</summary>
      <dl className="small mt-2 grid gap-2">
        <div>
          <dt>Values, a repeat a row</dt>
          <dd>takenAt, medium, f0Hz, q; as they are known also temperatureC, cycle, setPointC, f0StdHz, qStd, amplitudeV, pressurePa, humidityPercent</dd>
        </div>
        <div>
          <dt>Raw sweeps, a sweep a row</dt>
          <dd>takenAt, medium, startHz, stopHz and, as lists with blanks between, re and im or magnitude</dd>
        </div>
        <div>
          <dt>Raw sweeps, a point a row</dt>
          <dd>takenAt, medium, frequencyHz and re, im or magnitude; rows of one time are one sweep of 11 to 4001 points</dd>
        </div>
      </dl>
      <p className="small mt-2"><a className="link" href="/import-format.txt" target="_blank">Every column, its units and bounds</a></p>
    </details>
  );
}
