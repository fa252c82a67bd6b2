/** next-auth with credentials. Its JWT carries a session id; everything else is read from the row. */
import type { NextAuthOptions } from "next-auth";
import CredentialsProvider from "next-auth/providers/credentials";
import { z } from "zod";
import { getEnvironment } from "../../lib/config/environment";
import { AppError } from "../../lib/errors/app-error";
import { toSafePath } from "../../lib/http/origin";
import { type SignInRefusal, toRefusalText } from "../../lib/account/sign-in-refusal";
import { type Attempts, createAttempts } from "./attempts";
import { findIp } from "./client-address";
import { getDatabase, getPool } from "./database";
import { log } from "./log";
import { isSecure, sessionCookieName } from "./session-cookie";
import { signIn, signOut } from "./sign-in";

/** The cookie outlives the row, which ends after 14 days without a request. */
const COOKIE_S = 90 * 24 * 3600;

const credentialsSchema = z.object({
  email: z.string().trim().min(1).max(254),
  password: z.string().min(1).max(1000),
});

let attempts: Attempts | undefined;

export function getAttempts(): Attempts {
  attempts ??= createAttempts(getPool());
  return attempts;
}

let options: NextAuthOptions | undefined;

/** Made at the first request: the environment is not read while Next.js builds. */
export function getAuthOptions(): NextAuthOptions {
  options ??= createAuthOptions();
  return options;
}

function createAuthOptions(): NextAuthOptions {
  return {
    secret: getEnvironment().secrets.session,
    session: { strategy: "jwt", maxAge: COOKIE_S },
    pages: { signIn: "/sign-in", signOut: "/sign-in", error: "/sign-in" },
    useSecureCookies: isSecure(),
    cookies: {
      sessionToken: {
        name: sessionCookieName(),
        options: { httpOnly: true, sameSite: "lax", path: "/", secure: isSecure() },
      },
    },
    providers: [
      CredentialsProvider({
        name: "Password",
        credentials: { email: { type: "email" }, password: { type: "password" } },
        async authorize(credentials, request) {
          const given = credentialsSchema.safeParse(credentials);
          const headers = toHeaders(request.headers);
          try {
            if (!given.success) {
              throw new AppError("auth.wrong", "Enter address and password.");
            }
            const { accountId, sessionId } = await signIn(getDatabase(), getAttempts(), {
              ...given.data,
              ip: findIp(headers),
              userAgent: headers.get("user-agent") ?? "",
            });
            return { id: accountId, sessionId };
          } catch (error) {
            throw new Error(toRefusalText(toRefusal(error)), { cause: error });
          }
        },
      }),
    ],
    callbacks: {
      jwt: ({ token, user }) => ({ sessionId: user?.sessionId ?? token.sessionId }),
      session: ({ session }) => ({ expires: session.expires }),
      redirect: ({ url, baseUrl }) => `${baseUrl}${toOwnPath(url, baseUrl)}`,
    },
    events: {
      signOut: async ({ token }) => {
        if (token?.sessionId !== undefined) await signOut(getDatabase(), token.sessionId);
      },
    },
    logger: {
      error: (code, metadata) => log().error({ code, metadata }, "sign-in failed"),
      warn: () => undefined,
      debug: () => undefined,
    },
  };
}

/** The library hands headers on as a plain object. */
function toHeaders(given: Record<string, unknown> | undefined): Headers {
  const headers = new Headers();
  for (const [name, value] of Object.entries(given ?? {})) {
    if (typeof value === "string") headers.set(name, value);
  }
  return headers;
}

function toRefusal(error: unknown): SignInRefusal {
  if (error instanceof AppError) {
    const { triesLeft, retryAfterS } = error.details;
    if (error.code === "auth.wrong") {
      return { code: "auth.wrong", triesLeft: typeof triesLeft === "number" ? triesLeft : 0 };
    }
    if (error.code === "auth.rate-limited") {
      return {
        code: "auth.rate-limited",
        waitS: typeof retryAfterS === "number" ? retryAfterS : 60,
      };
    }
    if (error.code === "database.unavailable") return { code: "database.unavailable" };
  }
  log().error({ err: error }, "sign-in failed");
  return { code: "internal" };
}

/** Redirects stay on our host. */
function toOwnPath(url: string, baseUrl: string): string {
  if (url.startsWith("/")) return toSafePath(url);
  return URL.canParse(url) && new URL(url).origin === new URL(baseUrl).origin
    ? toSafePath(url.slice(new URL(url).origin.length))
    : "/";
}
