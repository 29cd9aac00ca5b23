/**
 * Means of adjacent values in equal blocks, the fewest that leave at most `most` blocks; the last may be shorter.
 *
 * @returns The series itself, with `blockLength` 1, when it is short enough.
 */
export function blockMeans(
  { x, y }: { x: Float64Array; y: Float64Array },
  most: number,
): { x: Float64Array; y: Float64Array; blockLength: number } {
  const blockLength = Math.max(1, Math.ceil(x.length / most));
  if (blockLength === 1) return { x, y, blockLength };
  return { x: means(x, blockLength), y: means(y, blockLength), blockLength };
}

function means(values: Float64Array, blockLength: number): Float64Array {
  const blocks = new Float64Array(Math.ceil(values.length / blockLength));
  for (let k = 0; k < blocks.length; k++) {
    const block = values.subarray(k * blockLength, (k + 1) * blockLength);
    blocks[k] = block[0] + block.reduce((sum, value) => sum + (value - block[0]), 0) / block.length;
  }
  return blocks;
}
