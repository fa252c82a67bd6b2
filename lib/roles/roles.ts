/**
 * Who may do what: the table of the product text, in one place, for pages and API alike.
 * `admin` does not imply `analyst`; a member holds one or more roles.
 */
export const ROLES = ["tester", "analyst", "reviewer", "admin"] as const;
export type Role = (typeof ROLES)[number];

export const CAPABILITIES = {
  /** See everything in the lab, with the history of each series. */
  see: ["tester", "analyst", "reviewer", "admin"],
  /** Create loudspeakers and series, edit the plan, upload, exclude a run with a reason. */
  capture: ["tester", "analyst"],
  /** Start or repeat an analysis, change its settings. */
  analyse: ["tester", "analyst"],
  /** Decide a band's cause, comment, ask for a run, sign off, reopen. */
  decide: ["analyst"],
  /** Publish, correct, withdraw, preview links. */
  publish: ["reviewer"],
  /** Members, roles, tokens of others, lab settings, the lab-wide trail. */
  administer: ["admin"],
} as const satisfies Record<string, readonly Role[]>;
export type Capability = keyof typeof CAPABILITIES;

export function may(roles: readonly Role[], capability: Capability): boolean {
  const allowed: readonly Role[] = CAPABILITIES[capability];
  return roles.some((role) => allowed.includes(role));
}

/** Rights of a token: what it was given, as far as its owner still has it. */
export function tokenRoles(given: readonly Role[], ownerNow: readonly Role[]): Role[] {
  return ROLES.filter((role) => given.includes(role) && ownerNow.includes(role));
}
