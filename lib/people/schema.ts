import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { ROLES } from "@/lib/permissions";
import { time } from "@/lib/schema";

export const roleSchema = z.enum(ROLES);
export const emailSchema = z.string().trim().toLowerCase().max(254).pipe(z.email("is not a mail address"));
export const personNameSchema = z.string().trim().min(1, "is missing").max(200);
/** Length is what counts; the upper bound only keeps the hash from being fed megabytes. */
export const passwordSchema = z.string().min(12, "must have at least 12 characters").max(200, "must have at most 200 characters");

export const mailWishesAnswer = z.object({
  alarms: z.boolean().describe("Alarms of every rig"),
  tasks: z.boolean().describe("Tasks that cannot wait"),
});
export type MailWishes = z.output<typeof mailWishesAnswer>;

export const personAnswer = z.object({
  id: z.string(),
  name: z.string(),
  email: z.string(),
  role: roleSchema,
  notify: mailWishesAnswer,
  /** To the minute; null for whoever has never signed in. */
  seenAt: time.nullable(),
  createdAt: time,
  closedAt: time.nullable(),
});
export type PersonAnswer = z.output<typeof personAnswer>;

export const createPersonBody = z.strictObject({ email: emailSchema, name: personNameSchema, role: roleSchema, password: passwordSchema });
export const changePersonBody = z
  .strictObject({ name: personNameSchema.optional(), role: roleSchema.optional() })
  .refine(({ name, role }) => name !== undefined || role !== undefined, "give a name or a role");
export const peopleQuery = pageQuery.extend({ state: z.enum(["open", "closed", "all"]).default("all"), search: z.string().trim().max(200).optional() });
export const peoplePage = pageOf(personAnswer);

export const invitationBody = z.strictObject({ email: emailSchema, name: personNameSchema, role: roleSchema });
export const invitationAnswer = z.object({
  id: z.string(),
  email: z.string(),
  name: z.string(),
  role: roleSchema,
  state: z.enum(["open", "accepted", "withdrawn", "expired"]),
  invitedBy: z.string(),
  createdAt: time,
  expiresAt: time,
});
export type InvitationAnswer = z.output<typeof invitationAnswer>;
export const invitationsPage = pageOf(invitationAnswer);
export const invitedAnswer = z.object({ id: z.string(), link: z.url() });
export const acceptInvitationBody = z.strictObject({ token: z.string().min(1).max(200), name: personNameSchema, password: passwordSchema });

export const tokenBody = z.strictObject({
  name: z.string().trim().min(1, "is missing").max(200),
  scope: z.enum(["read", "write"]).default("read"),
  expiresAt: time.optional(),
});
export const tokenAnswer = z.object({
  id: z.string(),
  name: z.string(),
  scope: z.enum(["read", "write"]),
  last4: z.string(),
  createdAt: time,
  expiresAt: time.nullable(),
  withdrawnAt: time.nullable(),
  lastUsedAt: time.nullable(),
});
export type TokenAnswer = z.output<typeof tokenAnswer>;
export const tokensPage = pageOf(tokenAnswer);
export const newTokenAnswer = z.object({ id: z.string(), token: z.string() });

export const meAnswer = z.object({
  id: z.string(),
  name: z.string(),
  email: z.string(),
  role: roleSchema,
  notify: mailWishesAnswer,
  laboratory: z.object({ name: z.string(), timeZone: z.string() }),
  /** Alarms that nobody has. */
  alarms: z.number().int(),
  serverTime: time,
});
export type MeAnswer = z.output<typeof meAnswer>;
export const changeMeBody = z
  .strictObject({ name: personNameSchema.optional(), notify: z.strictObject({ alarms: z.boolean().optional(), tasks: z.boolean().optional() }).optional() })
  .refine(({ name, notify }) => name !== undefined || notify !== undefined, "give a name or what to be told of");
export const changePasswordBody = z.strictObject({ current: z.string().max(200), password: passwordSchema });

export const askResetBody = z.strictObject({ email: emailSchema });
export const resetPasswordBody = z.strictObject({ token: z.string().min(1).max(200), password: passwordSchema });

export const auditQuery = pageQuery.extend({
  personId: idSchema.optional(),
  entity: z.string().max(60).optional(),
  entityId: z.string().max(64).optional(),
  since: time.optional(),
  until: time.optional(),
});
export const auditEventAnswer = z.object({
  id: z.string(),
  at: time,
  who: z.string(),
  personId: z.string().nullable(),
  rigId: z.string().nullable(),
  action: z.string(),
  entity: z.string(),
  entityId: z.string(),
  detail: z.record(z.string(), z.unknown()),
  about: z.string().nullable().describe("Name of the thing; null when it has none or is no more"),
  lines: z.array(z.object({ field: z.string(), from: z.string().optional(), to: z.string() })).describe("`detail` to be read: ids as names, `from` where a value was changed"),
});
export type AuditEventAnswer = z.output<typeof auditEventAnswer>;
export const auditPage = pageOf(auditEventAnswer);
