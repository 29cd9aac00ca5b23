/** The 1000 frequencies of NIST SP 1065 (2008) section 12.4, eq. (73). */
export function lcgSeries(): Float64Array {
  const y = new Float64Array(1000);
  let n = 1234567890;
  for (let i = 0; i < y.length; i++) {
    y[i] = n / 2147483647;
    n = (16807 * n) % 2147483647; // below 2^53, exact
  }
  return y;
}
