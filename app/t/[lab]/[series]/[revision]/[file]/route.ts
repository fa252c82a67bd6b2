import type { RouteArguments } from "@/app/_server/handle";
import { answerKit } from "@/app/_server/reader/answer-kit";

/** A part of the summary kit: card, pictures, report, values; all stay on their revision. */
export const GET = async (request: Request, route: RouteArguments): Promise<Response> =>
  answerKit(request, await route.params);
