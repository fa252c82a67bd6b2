import type { RouteArguments } from "@/app/_server/handle";
import { findIp } from "@/app/_server/client-address";
import { answerPage, type PackedPage } from "@/app/_server/reader/answer-page";
import { countComment } from "@/app/_server/reader/comment-limit";
import { answerNotFound, answerReader } from "@/app/_server/reader/plain-answers";
import { drawPreview, leaveComment } from "@/app/_server/reader/preview-page";
import { getEnvironment } from "@/lib/config/environment";
import { readUnits } from "@/lib/reader/units";
import { checkOrigin } from "@/lib/http/origin";

const GONE = "This link is unknown, was revoked or has expired. Ask the lab for a new one.";

const answer = (request: Request, page: PackedPage | null): Response =>
  page === null ? answerNotFound(request, GONE) : answerPage(request, page, false);

export const GET = (request: Request, route: RouteArguments): Promise<Response> =>
  answerReader(request, async () => {
    const query = new URL(request.url).searchParams;
    const view = { thanks: query.has("thanks"), units: readUnits(query.get("units")) };
    return answer(request, await drawPreview(await secretOf(route), { refused: null, ...view }));
  });

/** The form of the page, without script. */
export const POST = (request: Request, route: RouteArguments): Promise<Response> =>
  answerReader(request, async () => {
    checkOrigin(request, getEnvironment().publicUrl);
    const secret = await secretOf(route);
    const outcome = await leaveComment(secret, await request.formData(), (previewId) =>
      countComment(previewId, findIp(request.headers)),
    );
    if (outcome === "no such link") return answerNotFound(request, GONE);
    if (outcome !== null) {
      const view = { refused: outcome, thanks: false, units: "m" } as const;
      return answer(request, await drawPreview(secret, view));
    }
    return new Response(null, {
      status: 303,
      headers: { location: `/preview/${secret}?thanks#comment`, "cache-control": "no-store" },
    });
  });

async function secretOf(route: RouteArguments): Promise<string> {
  const { secret } = await route.params;
  return typeof secret === "string" ? secret : "";
}
