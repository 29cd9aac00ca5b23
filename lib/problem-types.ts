/**
 * Every kind of refusal that a call can answer with: the `type` of its problem is `/problems/<code>`, and that address shows
 * what stands here. Codes are part of the contract: they are added, never renamed.
 */
type ProblemType = {
  status: number;
  /** What it means, and what was kept. */
  means: string;
  /** What to do next. */
  remedy: string;
  /** The calls that it is peculiar to, as `METHOD /path`; without them any call may answer so. */
  calls?: readonly string[];
};

export const PROBLEM_TYPES = {
  invalid: {
    status: 400,
    means: "The address, the query or the body is not what the reference says. Nothing was changed. `errors` names every bad field with its path.",
    remedy: "Put the named fields right and send it again.",
  },
  "not-signed-in": {
    status: 401,
    means: "There was no session and no token, or the token is unknown, has run out or was withdrawn.",
    remedy: "Sign in, or send a token that is still good as Authorization: Bearer.",
  },
  "not-allowed": {
    status: 403,
    means: "The caller is known but may not do this: the role does not hold the permission, the token may only read, or a browser's change came from another origin.",
    remedy: "Ask somebody whose role may, or use a token that may write.",
  },
  "not-found": {
    status: 404,
    means: "Nothing has this address or id, or it belongs to another rig than the agent's own.",
    remedy: "Look the id up in the list that gave it out.",
  },
  conflict: {
    status: 409,
    means: "The request is right in itself, but the present state of the thing does not allow it. Nothing was changed.",
    remedy: "Read the thing again; `detail` says what stands in the way.",
  },
  exists: { status: 409, means: "The database already holds one like this. Nothing was changed.", remedy: "Choose another name, or change the one that is there." },
  "already-there": {
    status: 409,
    means: "There is one of this name, serial number, lot or address already. Nothing was changed.",
    remedy: "Use the one that is there, or choose another name.",
    calls: ["POST /api/people", "POST /api/invitations", "POST /api/sensors", "POST /api/liquids", "PATCH /api/liquids/{id}", "POST /api/liquids/{id}/lots", "POST /api/rigs", "PATCH /api/rigs/{id}"],
  },
  reference: {
    status: 409,
    means: "It refers to something that does not exist, or something else still refers to it. Nothing was changed.",
    remedy: "Look the ids in the body up again.",
  },
  record: { status: 409, means: "This is a record of what happened. Records are never changed or deleted.", remedy: "Add a correction beside it." },
  "lease-lost": {
    status: 409,
    means: "The step was given out again, or never under this lease. Readings that were stored stay stored.",
    remedy: "Drop the step and ask for the next one; it comes with a new lease and says what is missing.",
    calls: ["POST /api/agent/steps/{id}/readings", "POST /api/agent/steps/{id}/finish", "POST /api/agent/heartbeat"],
  },
  "other-agent": {
    status: 409,
    means: "Another agent program holds this rig's session and was heard of a short while ago.",
    remedy: "Stop one of the two; to take the rig over, say hello with `replace: true`.",
    calls: ["POST /api/agent/hello", "POST /api/agent/heartbeat", "POST /api/agent/steps/next"],
  },
  "rig-free": {
    status: 409,
    means: "No campaign is on the rig, so there is nothing to take over.",
    remedy: "Work at the rig; its agent gets no step until a campaign is queued.",
    calls: ["POST /api/rigs/{id}/take-over"],
  },
  "other-lot": {
    status: 409,
    means: "A running campaign has drawn another lot of the same liquid from this port so far. The bottle was not recorded.",
    remedy: "If the new lot is meant, send it again with `confirm: true`; it goes into the campaign's log.",
    calls: ["POST /api/rigs/{id}/loads"],
  },
  "other-liquid": {
    status: 422,
    means: "A running campaign draws another liquid from this port. The bottle was not recorded.",
    remedy: "Put the bottle on a free port, or wait until the campaign has ended.",
    calls: ["POST /api/rigs/{id}/loads"],
  },
  "mount-order": {
    status: 409,
    means: "The sensor was mounted elsewhere only after the time that was given.",
    remedy: "Give a later time; `detail` names the mount.",
    calls: ["POST /api/sensors/{id}/mounts"],
  },
  "position-taken": {
    status: 409,
    means: "Another sensor is mounted in this position of the rig.",
    remedy: "End that mount first, or give another position.",
    calls: ["POST /api/sensors/{id}/mounts"],
  },
  "mount-overlap": {
    status: 409,
    means: "At the time that was given the sensor or the position was taken by another mount.",
    remedy: "Look at the mounts and give a later time.",
    calls: ["POST /api/sensors/{id}/mounts"],
  },
  "mount-ended": { status: 409, means: "The mount has already ended. Its end stays as it was recorded.", remedy: "Nothing needs to be done.", calls: ["POST /api/mounts/{id}/end"] },
  "letter-taken": {
    status: 409,
    means: "The letter that run strips show for a liquid belongs to another liquid, or no letter is left.",
    remedy: "Choose another letter, or leave it out and one is chosen.",
    calls: ["POST /api/liquids", "PATCH /api/liquids/{id}"],
  },
  "last-administrator": {
    status: 409,
    means: "This person is the last administrator; without one nobody could keep people and rigs.",
    remedy: "Make another administrator first.",
    calls: ["PATCH /api/people/{id}", "POST /api/people/{id}/close"],
  },
  "answered-already": {
    status: 409,
    means: "Somebody has answered the task otherwise; `detail` names who and when. That answer stands.",
    remedy: "Talk to that person; a new task is opened if something is still to be done.",
    calls: ["POST /api/tasks/{id}/answer"],
  },
  retired: { status: 409, means: "It is retired, so that it cannot be changed or chosen. Nothing was changed.", remedy: "Bring it back first, or choose another." },
  needed: { status: 409, means: "A campaign that is not over still needs it, so it cannot be retired yet.", remedy: "Retire it when the campaign that `detail` names has ended." },
  "newer-version": {
    status: 409,
    means: "A newer version was saved since the one that this was written from. Nothing was saved.",
    remedy: "Compare with version `newest`, then save on top of it.",
  },
  "draft-changed": {
    status: 409,
    means: "The draft was changed elsewhere since it was read. Nothing was saved over it.",
    remedy: "Read the draft again, then change that.",
  },
  "only-draft": { status: 409, means: "The protocol has no version yet: its draft is all there is.", remedy: "Delete the protocol if it is not wanted." },
  "has-versions": { status: 409, means: "The protocol has versions, and versions are kept.", remedy: "Retire it instead." },
  "in-progress": {
    status: 409,
    means: "The first call with this Idempotency-Key is still at work, or has just failed.",
    remedy: "Send the same call again in a second.",
  },
  "never-ended": {
    status: 409,
    means: "The first call with this Idempotency-Key never came to its end, so it is not known here whether it took effect.",
    remedy: "Look whether it did, then use a new key.",
  },
  "shown-once": {
    status: 409,
    means: "The first call with this Idempotency-Key made a secret. It was shown that once and is not kept.",
    remedy: "Withdraw the token if its secret was lost, and make another.",
    calls: ["POST /api/tokens", "POST /api/rigs/{id}/tokens", "POST /api/invitations"],
  },
  gone: { status: 410, means: "It was there once and is no more: a link that has run out or was used, or a task that was withdrawn.", remedy: "Ask for a new one where that is possible." },
  "too-large": { status: 413, means: "The body is larger than the limit that `detail` names, 8 MiB after decoding for most calls.", remedy: "Send less at a time." },
  "unsupported-type": { status: 415, means: "The content type or encoding of the body is not one that this call reads.", remedy: "Send application/json, plain or gzip." },
  impossible: { status: 422, means: "Well-formed, but it cannot be done here. Nothing was changed.", remedy: "`detail` says why, and further members name what stands in the way." },
  "does-not-fit": {
    status: 422,
    means: "The campaign does not fit its rig, sensor or bottles. `errors` names each reason.",
    remedy: "Put right what `errors` names, then queue it again.",
    calls: ["POST /api/campaigns/{id}/queue"],
  },
  cautions: {
    status: 422,
    means: "The campaign has cautions that its caller has not acknowledged. `cautions` lists them all with code and message; it stays a draft.",
    remedy: "Read them, then queue it with all their codes in `acknowledgements`. It is logged under the caller's name. Local safety rules and the safety officer decide.",
    calls: ["POST /api/campaigns/{id}/queue"],
  },
  "not-mounted": {
    status: 422,
    means: "The campaign's sensor is not mounted on its rig yet, so the task cannot be called done.",
    remedy: "Record the mount; that answers the task.",
    calls: ["POST /api/tasks/{id}/answer"],
  },
  "key-reused": { status: 422, means: "The Idempotency-Key was used for another request within the last 30 days.", remedy: "Take a new key for each new thing to be done." },
  "too-many-requests": { status: 429, means: "Too many tries in a short time.", remedy: "Wait as long as `Retry-After` says." },
  internal: { status: 500, means: "An error of Longreed itself. The log has the reason under the answer's `requestId`.", remedy: "Try again; if it stays, give the `requestId` to whoever keeps Longreed." },
  unavailable: { status: 503, means: "The database or another part cannot be reached for the moment. Nothing was changed.", remedy: "Send the same call again after `Retry-After` seconds." },
} as const satisfies Record<string, ProblemType>;

export type ProblemCode = keyof typeof PROBLEM_TYPES;

export const PROBLEM_CODES = Object.keys(PROBLEM_TYPES) as ProblemCode[];

export const problemType = (code: ProblemCode): ProblemType => PROBLEM_TYPES[code];

export const isProblemCode = (code: string): code is ProblemCode => Object.hasOwn(PROBLEM_TYPES, code);
