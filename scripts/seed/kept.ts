import fs from "node:fs";
import path from "node:path";
import { z } from "zod";
import type { RigEntry } from "@/rig-simulator/start-rig";
import { writePrivately } from "../lib/secrets.mjs";

const tokens = z.record(z.string(), z.object({ tokenId: z.string(), token: z.string() }));

/** What the data folder keeps for the demo, readable by its owner only: agent tokens and the list of rigs to simulate. */
export class Kept {
  constructor(private readonly dataFolder: string) {}

  get simulatorFolder(): string {
    return path.join(this.dataFolder, "simulator");
  }

  token(rigId: string): { tokenId: string; token: string } | undefined {
    return this.tokens()[rigId];
  }

  keepToken(rigId: string, token: { tokenId: string; token: string }): void {
    writePrivately(this.file("demo-tokens.json"), { ...this.tokens(), [rigId]: token });
  }

  /** The simulator of the laboratory follows this list. Unchanged it is left alone. */
  writeRigs(entries: readonly RigEntry[]): void {
    if (JSON.stringify(this.rigs()) !== JSON.stringify(entries)) writePrivately(this.file("demo-rigs.json"), entries);
  }

  /** The server answers elsewhere than last time. */
  moveTo(url: string): void {
    this.writeRigs(this.rigs().map((entry) => ({ ...entry, url })));
  }

  rigs(): RigEntry[] {
    return this.read("demo-rigs.json", z.array(z.custom<RigEntry>())) ?? [];
  }

  private tokens(): z.output<typeof tokens> {
    return this.read("demo-tokens.json", tokens) ?? {};
  }

  private read<T>(name: string, schema: z.ZodType<T>): T | undefined {
    if (!fs.existsSync(this.file(name))) return undefined;
    return schema.parse(JSON.parse(fs.readFileSync(this.file(name), "utf8")));
  }

  private file(name: string): string {
    return path.join(this.dataFolder, name);
  }
}
