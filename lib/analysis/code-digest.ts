import { createHash } from "node:crypto";

const FOLDERS = ["lib/analysis", "lib/numerics"];

let digest: Promise<Buffer> | undefined;

/** SHA-256 of the sources that results are made with: a new version of the program asks for none of an old one's results. */
export function codeDigest(): Promise<Buffer> {
  digest ??= readDigest();
  digest.catch(() => (digest = undefined));
  return digest;
}

async function readDigest(): Promise<Buffer> {
  // Asked for by name at run time: a bundler that saw what is read here would take the whole project along.
  const { readdir, readFile } = process.getBuiltinModule("node:fs/promises");
  const hash = createHash("sha256");
  for (const folder of FOLDERS) {
    const files = await readdir(`${process.cwd()}/${folder}`, { recursive: true });
    for (const file of files.filter((name) => name.endsWith(".ts")).sort()) hash.update(`${folder}/${file}\0`).update(await readFile(`${process.cwd()}/${folder}/${file}`));
  }
  return hash.digest();
}
