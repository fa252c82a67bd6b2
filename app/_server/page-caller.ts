/** Who looks at a page. Every page asks here itself; the proxy is a convenience. */
import { headers } from "next/headers";
import { redirect } from "next/navigation";
import { cache } from "react";
import { toSafePath } from "../../lib/http/origin";
import { type Capability, may } from "../../lib/roles/roles";
import { type Caller, findCaller, type LabCaller } from "./caller";
import { getDatabase } from "./database";
import { PATH_HEADER } from "./path-header";

/** Once per request, however many components ask. null where nobody is signed in. */
export const findPageCaller = cache(async (): Promise<Caller | null> => {
  return findCaller(getDatabase(), await headers());
});

/** Somebody signed in, perhaps without a lab; else on to the sign-in. */
export async function getPageAccount(): Promise<Caller> {
  const caller = await findPageCaller();
  if (caller === null) {
    const path = toSafePath((await headers()).get(PATH_HEADER));
    redirect(path === "/" ? "/sign-in" : `/sign-in?next=${encodeURIComponent(path)}`);
  }
  return caller;
}

/**
 * A member of a lab; else on to the sign-in, or to the account page, which offers the other labs.
 * Whether a capability is missing the page asks of `may(caller.roles, ...)` and leaves the control
 * out.
 */
export async function getPageCaller(): Promise<LabCaller> {
  const caller = await getPageAccount();
  const { labId } = caller;
  if (labId === null) redirect("/account");
  return { ...caller, labId };
}

/** The same for a page that is all one capability: others go back to the list. */
export async function getPageCallerWith(capability: Capability): Promise<LabCaller> {
  const caller = await getPageCaller();
  if (!may(caller.roles, capability)) redirect("/series");
  return caller;
}
