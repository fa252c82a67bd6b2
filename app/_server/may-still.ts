import { may, type Capability } from "../../lib/roles/roles";
import { findCaller, type LabCaller } from "./caller";
import { getDatabase } from "./database";

/** Whether whoever sent this request still works in the same lab and may still do this. */
export async function mayStill(
  request: Request,
  caller: LabCaller,
  capability: Capability,
): Promise<boolean> {
  const now = await findCaller(getDatabase(), request.headers).catch(() => null);
  return now !== null && now.labId === caller.labId && may(now.roles, capability);
}
