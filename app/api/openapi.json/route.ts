import { toOpenApi } from "@/lib/api/openapi";
import { getEnvironment } from "@/lib/config/environment";
import { sessionCookieName } from "../../_server/session-cookie";

/** The document is public: it says what can be asked, not what is stored. */
export function GET(): Response {
  const { publicUrl } = getEnvironment();
  return Response.json(toOpenApi({ publicUrl, cookie: sessionCookieName() }), {
    headers: { "cache-control": "public, max-age=300", "x-content-type-options": "nosniff" },
  });
}
