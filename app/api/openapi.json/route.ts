import { toOpenApi } from "@/lib/api/openapi";
import { getEnvironment } from "@/lib/config/environment";

/** The document is public: it says what can be asked, not what is stored. */
export function GET(): Response {
  return Response.json(toOpenApi(getEnvironment().publicUrl), {
    headers: { "cache-control": "public, max-age=300", "x-content-type-options": "nosniff" },
  });
}
