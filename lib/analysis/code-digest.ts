import { createHash } from "node:crypto";
import fs from "node:fs/promises";
import path from "node:path";

const FOLDERS = ["lib/analysis", "lib/numerics"];

let digest: Promise<Buffer> | undefined;

/** SHA-256 of the sources that results are made with: a new version of the program asks for none of an old one's results. */
export function codeDigest(): Promise<Buffer> {
  digest ??= readDigest();
  digest.catch(() => (digest = undefined));
  return digest;
}

async function readDigest(): Promise<Buffer> {
  const hash = createHash("sha256");
  for (const folder of FOLDERS) {
    const files = await fs.readdir(path.join(process.cwd(), folder), { recursive: true });
    for (const file of files.filter((name) => name.endsWith(".ts")).sort()) hash.update(`${folder}/${file}\0`).update(await fs.readFile(path.join(process.cwd(), folder, file)));
  }
  return hash.digest();
}
