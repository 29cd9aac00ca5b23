import { openApi } from "@/app/api/openapi";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "public",
  summary: "This reference, as OpenAPI 3.1",
  handle: () => openApi(),
});
