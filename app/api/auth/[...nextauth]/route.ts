import NextAuth from "next-auth";
import { getAuthOptions } from "@/app/_server/auth";
import { answerError, type RouteArguments, toRequestId } from "@/app/_server/handle";
import { getEnvironment } from "@/lib/config/environment";
import { checkOrigin } from "@/lib/http/origin";

type Handler = (request: Request, route: RouteArguments) => Promise<Response>;

const serve: Handler = async (request, route) => {
  try {
    checkOrigin(request, getEnvironment().publicUrl);
    // The library builds its addresses from this variable and reads it at each request.
    process.env.NEXTAUTH_URL = getEnvironment().publicUrl;
    // The library's own type is any.
    // oxlint-disable-next-line typescript/no-unsafe-type-assertion
    const handler = NextAuth(getAuthOptions()) as Handler;
    return await handler(request, route);
  } catch (error) {
    return answerError(error, request, toRequestId(request.headers));
  }
};

export { serve as GET, serve as POST };
