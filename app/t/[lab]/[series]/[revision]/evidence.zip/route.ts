import type { RouteArguments } from "@/app/_server/handle";
import { answerEvidence } from "@/app/_server/reader/answer-evidence";

/** What one revision rests on, for readers who want to compute it again. */
export const GET = async (request: Request, route: RouteArguments): Promise<Response> =>
  answerEvidence(request, await route.params);
