import { AuditEvent } from "@/models/audit-event";

/** Actions recorded about a thing, oldest first. */
export async function auditedActions(entity: string, entityId: string): Promise<string[]> {
  const events = await AuditEvent.findAll({ where: { entity, entityId }, order: [["id", "ASC"]] });
  return events.map(({ action }) => action);
}
