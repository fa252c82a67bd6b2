import type { Role } from "@/lib/roles/roles";

export interface LabChoice {
  id: string;
  name: string;
}

export interface AccountMenuProps {
  name: string;
  roles: readonly Role[];
  lab: LabChoice;
  /** Every lab of the account, the present one too. */
  labs: readonly LabChoice[];
  onSwitchLab: (labId: string) => void;
  onSignOut: () => void;
}

export const TRIGGER =
  "flex min-h-9 items-center gap-2.5 rounded-control px-1 text-small whitespace-nowrap text-ink-2 hover:text-ink max-md:min-h-11";

/** Who is signed in, as what. */
export function TriggerFace({ name, roles }: Pick<AccountMenuProps, "name" | "roles">) {
  return (
    <>
      <span className="max-w-40 truncate">{name}</span>
      <span className="figures text-label max-sm:sr-only">{roles.join(", ")}</span>
      <svg width="10" height="7" viewBox="0 0 10 7" aria-hidden="true">
        <path d="M1 1.2 5 5.4 9 1.2" fill="none" stroke="currentColor" strokeWidth="1.6" />
      </svg>
    </>
  );
}
