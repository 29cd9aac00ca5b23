/**
 * Hazard statements of liquids as a bottle's label carries them.
 * Source: United Nations, Globally Harmonized System of Classification and Labelling of Chemicals, Rev. 10 (2023),
 * annex 3, section 1 (codes and texts; written from memory, not checked against a copy). The classes are the usual short forms; where a statement serves two categories both are named.
 */
export type HazardStatement = { hazardClass: string; text: string };

const STATEMENTS: Readonly<Record<string, HazardStatement>> = {
  H224: { hazardClass: "Flam. Liq. 1", text: "Extremely flammable liquid and vapour" },
  H225: { hazardClass: "Flam. Liq. 2", text: "Highly flammable liquid and vapour" },
  H226: { hazardClass: "Flam. Liq. 3", text: "Flammable liquid and vapour" },
  H227: { hazardClass: "Flam. Liq. 4", text: "Combustible liquid" },
  H271: { hazardClass: "Ox. Liq. 1", text: "May cause fire or explosion; strong oxidizer" },
  H272: { hazardClass: "Ox. Liq. 2 or 3", text: "May intensify fire; oxidizer" },
  H290: { hazardClass: "Met. Corr. 1", text: "May be corrosive to metals" },
  H300: { hazardClass: "Acute Tox. 1 or 2, oral", text: "Fatal if swallowed" },
  H301: { hazardClass: "Acute Tox. 3, oral", text: "Toxic if swallowed" },
  H302: { hazardClass: "Acute Tox. 4, oral", text: "Harmful if swallowed" },
  H304: { hazardClass: "Asp. Tox. 1", text: "May be fatal if swallowed and enters airways" },
  H310: { hazardClass: "Acute Tox. 1 or 2, dermal", text: "Fatal in contact with skin" },
  H311: { hazardClass: "Acute Tox. 3, dermal", text: "Toxic in contact with skin" },
  H312: { hazardClass: "Acute Tox. 4, dermal", text: "Harmful in contact with skin" },
  H314: { hazardClass: "Skin Corr. 1", text: "Causes severe skin burns and eye damage" },
  H315: { hazardClass: "Skin Irrit. 2", text: "Causes skin irritation" },
  H317: { hazardClass: "Skin Sens. 1", text: "May cause an allergic skin reaction" },
  H318: { hazardClass: "Eye Dam. 1", text: "Causes serious eye damage" },
  H319: { hazardClass: "Eye Irrit. 2", text: "Causes serious eye irritation" },
  H330: { hazardClass: "Acute Tox. 1 or 2, inhalation", text: "Fatal if inhaled" },
  H331: { hazardClass: "Acute Tox. 3, inhalation", text: "Toxic if inhaled" },
  H332: { hazardClass: "Acute Tox. 4, inhalation", text: "Harmful if inhaled" },
  H334: { hazardClass: "Resp. Sens. 1", text: "May cause allergy or asthma symptoms or breathing difficulties if inhaled" },
  H335: { hazardClass: "STOT SE 3", text: "May cause respiratory irritation" },
  H336: { hazardClass: "STOT SE 3", text: "May cause drowsiness or dizziness" },
  H340: { hazardClass: "Muta. 1", text: "May cause genetic defects" },
  H341: { hazardClass: "Muta. 2", text: "Suspected of causing genetic defects" },
  H350: { hazardClass: "Carc. 1", text: "May cause cancer" },
  H351: { hazardClass: "Carc. 2", text: "Suspected of causing cancer" },
  H360: { hazardClass: "Repr. 1", text: "May damage fertility or the unborn child" },
  H361: { hazardClass: "Repr. 2", text: "Suspected of damaging fertility or the unborn child" },
  H370: { hazardClass: "STOT SE 1", text: "Causes damage to organs" },
  H371: { hazardClass: "STOT SE 2", text: "May cause damage to organs" },
  H372: { hazardClass: "STOT RE 1", text: "Causes damage to organs through prolonged or repeated exposure" },
  H373: { hazardClass: "STOT RE 2", text: "May cause damage to organs through prolonged or repeated exposure" },
  H400: { hazardClass: "Aquatic Acute 1", text: "Very toxic to aquatic life" },
  H410: { hazardClass: "Aquatic Chronic 1", text: "Very toxic to aquatic life with long lasting effects" },
  H411: { hazardClass: "Aquatic Chronic 2", text: "Toxic to aquatic life with long lasting effects" },
  H412: { hazardClass: "Aquatic Chronic 3", text: "Harmful to aquatic life with long lasting effects" },
  H413: { hazardClass: "Aquatic Chronic 4", text: "May cause long lasting harmful effects to aquatic life" },
};

/** Codes that people may choose from, in order. */
export const GHS_CODES: readonly string[] = Object.keys(STATEMENTS);

/** What a code says; undefined for one that is not listed. Letters behind the digits (H360FD) name the route or effect. */
export const hazardStatement = (code: string): HazardStatement | undefined => STATEMENTS[code.slice(0, 4)];

const FLAMMABLE = new Set(["H224", "H225", "H226"]);

/** Acute toxicity 1 to 3; damage to organs, genes, fertility and cancer in the category that is established. */
const TOXIC = new Set(["H300", "H301", "H310", "H311", "H330", "H331", "H340", "H350", "H360", "H370", "H372"]);

export const flammableCodes = (ghs: readonly string[]): string[] => ghs.filter((code) => FLAMMABLE.has(code.slice(0, 4)));
export const toxicCodes = (ghs: readonly string[]): string[] => ghs.filter((code) => TOXIC.has(code.slice(0, 4)));
