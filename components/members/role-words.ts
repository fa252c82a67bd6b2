import type { Role } from "@/lib/roles/roles";

/** What each role may do, in a sentence. Everybody sees everything in the lab. */
export const ROLE_SENTENCES: Record<Role, string> = {
  tester: "Enters loudspeakers, plans series, sends recordings and starts analyses.",
  analyst: "Does all that a tester does, decides the cause of each band and signs off.",
  reviewer: "Publishes what is signed off, corrects and withdraws it, and makes preview links.",
  admin:
    "Runs the lab: members, tokens of others, settings and the trail. Measuring, deciding and publishing need the other roles.",
};

/** The same roles, in whatever order they were ticked. */
export const sameRoles = (a: readonly Role[], b: readonly Role[]): boolean =>
  a.length === b.length && a.every((role) => b.includes(role));

/** @returns the id of the one member who is admin; null where there are several. */
export function findOnlyAdmin(
  members: readonly { id: string; roles: readonly Role[] }[],
): string | null {
  const admins = members.filter((member) => member.roles.includes("admin"));
  return admins.length === 1 ? (admins[0]?.id ?? null) : null;
}

/** "3 people, 1 open invitation" */
export function toMembersLine(people: number, invitations: number): string {
  const who = people === 1 ? "1 person" : `${people} people`;
  if (invitations === 0) return who;
  return `${who}, ${invitations} open invitation${invitations === 1 ? "" : "s"}`;
}
