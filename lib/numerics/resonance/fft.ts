/**
 * Discrete Fourier transform in place, Σ z[k]·e^(−2πijk/n), for n a power of two.
 *
 * @throws RangeError if the lengths differ or are no power of two.
 *
 * Source: Cooley & Tukey, Math. Comput. 19 (1965) 297.
 */
export function fft(re: Float64Array, im: Float64Array): void {
  const n = re.length;
  if (n === 0 || im.length !== n || (n & (n - 1)) !== 0) throw new RangeError(`the length must be a power of two, got ${n} and ${im.length}`);
  for (let i = 1, j = 0; i < n; i++) {
    let bit = n >> 1;
    for (; j & bit; bit >>= 1) j ^= bit;
    j ^= bit;
    if (i < j) {
      [re[i], re[j]] = [re[j], re[i]];
      [im[i], im[j]] = [im[j], im[i]];
    }
  }
  for (let size = 2; size <= n; size *= 2) {
    const half = size / 2;
    for (let k = 0; k < half; k++) {
      const angle = (-2 * Math.PI * k) / size;
      const wR = Math.cos(angle);
      const wI = Math.sin(angle);
      for (let i = k; i < n; i += size) {
        const j = i + half;
        const tR = wR * re[j] - wI * im[j];
        const tI = wR * im[j] + wI * re[j];
        re[j] = re[i] - tR;
        im[j] = im[i] - tI;
        re[i] += tR;
        im[i] += tI;
      }
    }
  }
}
