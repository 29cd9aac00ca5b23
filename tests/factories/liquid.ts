import type { CreationAttributes } from "sequelize";
import { Liquid } from "@/models/liquid";
import { next, now, placeOfFile } from "./now";

const LETTERS = "ABCDEFGHIJKLMNOPQRSTUVWXYZ";

const LETTERS_A_FILE = 40;
let liquids = 0;

/** Water, harmless, under a name and a letter of its own. */
export function buildLiquid(given: Partial<CreationAttributes<Liquid>> = {}): Promise<Liquid> {
  const n = placeOfFile() * LETTERS_A_FILE + liquids++;
  const letter = `${LETTERS[n % 26]}${LETTERS[Math.floor(n / 26) % 26]}`;
  return Liquid.create({ name: `Liquid ${next()}`, letter, model: "water", createdAt: now, ...given });
}
