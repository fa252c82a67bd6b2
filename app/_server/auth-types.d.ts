import "next-auth";
import "next-auth/jwt";

declare module "next-auth" {
  // What authorize answers; a type of next-auth is widened by interface alone.
  interface User {
    sessionId: string;
  }
}

declare module "next-auth/jwt" {
  interface JWT {
    sessionId?: string;
  }
}
