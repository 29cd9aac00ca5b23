import { mailWishes } from "@/lib/people/mail-wishes";
import type { PersonAnswer } from "@/lib/people/schema";
import type { Person } from "@/models/person";

export const presentPerson = ({ id, name, email, role, notify, createdAt, closedAt, seenAt }: Person): PersonAnswer => ({
  id,
  name,
  email,
  role,
  notify: mailWishes({ role, notify }),
  seenAt: seenAt?.toISOString() ?? null,
  createdAt: createdAt.toISOString(),
  closedAt: closedAt?.toISOString() ?? null,
});
