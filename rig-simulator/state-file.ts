import { createHash } from "node:crypto";
import { mkdirSync, readFileSync, renameSync, writeFileSync } from "node:fs";
import path from "node:path";
import type { WorldStore } from "./rig";
import type { World } from "./world";

/** A rig's world in a file of its own, replaced as a whole. The name is a digest of what makes the rig this rig: no token is kept. */
export function fileStore(folder: string, identity: readonly string[]): WorldStore {
  const file = path.join(folder, `${rigDigest(identity)}.json`);
  return {
    load: () => {
      try {
        return JSON.parse(readFileSync(file, "utf8")) as World;
      } catch (error) {
        if ((error as NodeJS.ErrnoException).code === "ENOENT") return undefined;
        throw new Error(`The rig's state in ${file} cannot be read: ${(error as Error).message}. Remove the file to start afresh.`);
      }
    },
    save: (world) => {
      mkdirSync(folder, { recursive: true });
      writeFileSync(`${file}.new`, JSON.stringify(world));
      renameSync(`${file}.new`, file);
    },
  };
}

export const rigDigest = (identity: readonly string[]): string =>
  createHash("sha256").update(JSON.stringify(identity)).digest("hex").slice(0, 16);
