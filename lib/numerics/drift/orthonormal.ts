/** Orthonormal basis of the columns' span by Gram and Schmidt, each direction cleaned twice; dependent columns add none. */
export function orthonormal(columns: readonly Float64Array[]): Float64Array[] {
  const basis: Float64Array[] = [];
  for (const column of columns) {
    const rest = column.slice();
    for (let pass = 0; pass < 2; pass++) for (const direction of basis) takeOff(direction, rest);
    const length = Math.sqrt(dot(rest, rest));
    if (length > 1e-10 * Math.sqrt(dot(column, column))) basis.push(rest.map((value) => value / length));
  }
  return basis;
}

/** Takes the part along a unit vector off another, in place; returns the size of that part. */
export function takeOff(direction: Float64Array, from: Float64Array): number {
  const share = dot(direction, from);
  for (let i = 0; i < from.length; i++) from[i] -= share * direction[i];
  return share;
}

export function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}
