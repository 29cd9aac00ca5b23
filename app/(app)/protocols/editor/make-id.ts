/** An id for a block or limit that is new in the browser. */
export function makeId(): string {
  return Array.from(crypto.getRandomValues(new Uint8Array(5)), (byte) => byte.toString(16).padStart(2, "0")).join("");
}
