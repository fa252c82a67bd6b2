import type { RouteArguments } from "@/app/_server/handle";
import { answerPublication } from "@/app/_server/reader/answer-publication";

/** The newest revision. */
export const GET = async (request: Request, route: RouteArguments): Promise<Response> =>
  answerPublication(request, await route.params);
