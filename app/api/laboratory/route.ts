import { route } from "@/lib/http/route";
import { readLaboratory } from "@/lib/laboratory";
import { changeLaboratory } from "@/lib/laboratory-settings/change";
import { laboratoryAnswer, laboratoryBody } from "@/lib/laboratory-settings/schema";

export const GET = route({
  permission: "read",
  summary: "The laboratory's name and time zone",
  answer: laboratoryAnswer,
  handle: () => readLaboratory(),
});

export const PATCH = route({
  permission: "settings",
  summary: "Change the laboratory's name or time zone",
  body: laboratoryBody,
  answer: laboratoryAnswer,
  handle: ({ person, body, now }) => changeLaboratory({ by: person, now, ...body }),
});
