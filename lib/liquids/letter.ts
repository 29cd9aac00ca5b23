const LETTERS = [..."ABCDEFGHIJKLMNOPQRSTUVWXYZ"];
const DIGITS = [..."23456789"];

/**
 * The letter under which a liquid stands in run strips: the first of its name, else another initial, another letter of the
 * name, the first letter with a digit, any free letter, any letter with a digit or a second letter.
 * Undefined when all are taken.
 */
export function chooseLetter(name: string, taken: ReadonlySet<string>): string | undefined {
  const plain = name.normalize("NFD").toUpperCase();
  const letters = [...plain].filter((sign) => LETTERS.includes(sign));
  const initials = (plain.match(/[A-Z]+/g) ?? []).map((word) => word.charAt(0));
  const [first = "L"] = initials;
  const candidates = [
    first,
    ...initials,
    ...letters,
    ...DIGITS.map((digit) => first + digit),
    ...LETTERS,
    ...LETTERS.map((second) => first + second),
    ...LETTERS.flatMap((letter) => [...DIGITS, ...LETTERS].map((second) => letter + second)),
  ];
  return candidates.find((letter) => !taken.has(letter));
}
