import type { Person } from "../../../lib/api/common";

/** null where nobody did it, or where the name is not known any more. */
export function toPerson(id: string | null, name: string | null): Person | null {
  return id === null || name === null ? null : { id, name };
}
