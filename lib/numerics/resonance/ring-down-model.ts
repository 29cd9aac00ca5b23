import { solveCholesky } from "@/lib/numerics/resonance/small-linear";

/** The separable least-squares problem of a decaying tone at one (ω, γ), both per sample. */
export type DecayModel = {
  /** Σr² formed sample by sample, Σy² about the mean, and lag-1 autocorrelation of the residuals. */
  squares: number;
  energy: number;
  lag1: number;
  /** v = e^(−γj)(cosine·cos ωj + sine·sin ωj) + constant, j counting samples. */
  cosine: number;
  sine: number;
  constant: number;
  /** Gram matrix of the projected derivative columns with respect to ω and γ, and their products with the residual. */
  ww: number;
  wg: number;
  gg: number;
  gradientW: number;
  gradientG: number;
};

export function emptyDecayModel(): DecayModel {
  return {
    squares: 0, energy: 0, lag1: 0, cosine: 0, sine: 0, constant: 0,
    ww: 0, wg: 0, gg: 0, gradientW: 0, gradientG: 0,
  };
}

/** cos, sin, 1, j·cos, j·sin (all but the third times the decay), then the data. */
const COLUMNS = 5;
const LINEAR = 3;
/** The tone is carried on by turning a phasor, and set right from its angle this often. */
const TURNS = 128;
/** Residuals this small against the data are rounding and say nothing. */
const ROUNDING = 2 ** -40;
const gram = new Float64Array((COLUMNS + 1) * COLUMNS);
const column = new Float64Array(COLUMNS + 1);

/** Fills `out`; false when the columns do not determine the linear part. Two passes over the samples. */
export function decayModel(y: Float64Array, omega: number, gamma: number, out: DecayModel): boolean {
  const n = y.length;
  let mean = 0;
  for (let i = 0; i < n; i++) mean += y[i] / n;
  const decay = Math.exp(-gamma);
  const turnR = decay * Math.cos(omega);
  const turnI = decay * Math.sin(omega);
  gram.fill(0);
  let energy = 0;
  let c = 1;
  let s = 0;
  column[2] = 1;
  for (let i = 0; i < n; i++) {
    if (i % TURNS === 0) {
      const height = Math.exp(-gamma * i);
      c = height * Math.cos(omega * i);
      s = height * Math.sin(omega * i);
    }
    column[0] = c;
    column[1] = s;
    column[3] = i * c;
    column[4] = i * s;
    column[5] = y[i] - mean;
    energy += column[5] * column[5];
    for (let j = 0; j <= COLUMNS; j++) for (let k = 0; k <= j && k < COLUMNS; k++) gram[COLUMNS * j + k] += column[j] * column[k];
    [c, s] = [c * turnR - s * turnI, c * turnI + s * turnR];
  }
  const at = (j: number, k: number): number => (j >= k ? gram[COLUMNS * j + k] : gram[COLUMNS * k + j]);

  /** Coefficients of column j (or the data, j = 5) on the linear columns. */
  const onto = (j: number): Float64Array | undefined => {
    const block = new Float64Array(LINEAR * LINEAR);
    const b = new Float64Array(LINEAR);
    for (let k = 0; k < LINEAR; k++) {
      b[k] = at(j, k);
      for (let l = 0; l < LINEAR; l++) block[LINEAR * k + l] = at(k, l);
    }
    return solveCholesky(block, b, LINEAR) ? b : undefined;
  };
  const ofData = onto(5);
  const ofC = onto(3);
  const ofS = onto(4);
  if (!ofData || !ofC || !ofS) return false;
  const along = (j: number, coefficients: Float64Array): number =>
    coefficients[0] * at(j, 0) + coefficients[1] * at(j, 1) + coefficients[2] * at(j, 2);
  const cc = at(3, 3) - along(3, ofC);
  const cs = at(4, 3) - along(4, ofC);
  const ss = at(4, 4) - along(4, ofS);
  const cy = at(5, 3) - along(5, ofC);
  const sy = at(5, 4) - along(5, ofS);

  const [A, B, constant] = ofData;
  // ∂/∂ω = B·(j·cos) − A·(j·sin);  ∂/∂γ = −A·(j·cos) − B·(j·sin).
  out.ww = B * B * cc - 2 * A * B * cs + A * A * ss;
  out.gg = A * A * cc + 2 * A * B * cs + B * B * ss;
  out.wg = -A * B * cc - (B * B - A * A) * cs + A * B * ss;
  out.gradientW = B * cy - A * sy;
  out.gradientG = -A * cy - B * sy;
  out.cosine = A;
  out.sine = B;
  out.constant = constant + mean;
  out.energy = energy;
  sumResiduals(y, { omega, gamma }, out);
  return Number.isFinite(out.squares);
}

function sumResiduals(y: Float64Array, { omega, gamma }: { omega: number; gamma: number }, out: DecayModel): void {
  const decay = Math.exp(-gamma);
  const turnR = decay * Math.cos(omega);
  const turnI = decay * Math.sin(omega);
  let squares = 0, products = 0, last = 0, c = 1, s = 0;
  for (let i = 0; i < y.length; i++) {
    if (i % TURNS === 0) {
      const height = Math.exp(-gamma * i);
      c = height * Math.cos(omega * i);
      s = height * Math.sin(omega * i);
    }
    const r = y[i] - out.constant - out.cosine * c - out.sine * s;
    squares += r * r;
    products += r * last;
    last = r;
    [c, s] = [c * turnR - s * turnI, c * turnI + s * turnR];
  }
  out.squares = squares;
  const exact = squares <= ROUNDING ** 2 * (out.energy + y.length * out.constant ** 2);
  out.lag1 = exact ? 0 : products / squares;
}
