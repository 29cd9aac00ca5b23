/** The body of an answer out of pieces that are made as they are fetched; whoever stops fetching ends their making. */
export function streamOf(pieces: AsyncIterable<string | Uint8Array>): ReadableStream<Uint8Array> {
  const encoder = new TextEncoder();
  const iterator = pieces[Symbol.asyncIterator]();
  return new ReadableStream<Uint8Array>({
    async pull(controller) {
      const { done, value } = await iterator.next();
      if (done) controller.close();
      else controller.enqueue(typeof value === "string" ? encoder.encode(value) : value);
    },
    async cancel() {
      await iterator.return?.();
    },
  });
}
