import type { PersonAnswer } from "@/lib/people/schema";
import type { Person } from "@/models/person";

export const presentPerson = ({ id, name, email, role, createdAt, closedAt }: Person): PersonAnswer => ({
  id,
  name,
  email,
  role,
  createdAt: createdAt.toISOString(),
  closedAt: closedAt?.toISOString() ?? null,
});
