import { z } from "zod";
import { openApi } from "@/app/api/openapi";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "public",
  summary: "This reference, as OpenAPI 3.1",
  answer: z.looseObject({ openapi: z.string(), paths: z.record(z.string(), z.unknown()), components: z.record(z.string(), z.unknown()) }),
  handle: () => openApi(),
});
