import { createHash, randomBytes } from "node:crypto";
import type { CreationAttributes } from "sequelize";
import { AgentToken } from "@/models/agent-token";
import { now } from "./now";

export function buildAgentToken(given: Partial<CreationAttributes<AgentToken>> & { rigId: string }): Promise<AgentToken> {
  return AgentToken.create({ name: "bench", tokenHash: createHash("sha256").update(randomBytes(16)).digest(), last4: "0000", createdAt: now, ...given });
}
