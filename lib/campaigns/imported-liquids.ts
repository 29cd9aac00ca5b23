type ImportedLiquid = { slot: string; name: string; letter: string; tint: 1 | 2 | 3 };

const TINTS = [1, 2, 3] as const;

/** Media of an imported campaign as strips and lists draw liquids: nobody has recorded what they are, so each has a letter of its name and a tint by its place. */
export function importedLiquids(media: readonly string[]): ImportedLiquid[] {
  const letters = new Set(["A"]);
  return media
    .filter((medium) => medium !== "air")
    .map((medium, i) => {
      const own = [...medium.toUpperCase()].find((letter) => /\p{L}|\p{N}/u.test(letter) && !letters.has(letter)) ?? "L";
      letters.add(own);
      return { slot: medium, name: medium, letter: own, tint: TINTS[i % TINTS.length] };
    });
}
