"use client";

import { useId } from "react";
import { ROLES, type Role } from "@/lib/roles/roles";
import { Checkbox } from "../parts/checkbox";
import { joinClasses } from "../parts/join-classes";
import { ROLE_SENTENCES } from "./role-words";

interface RoleBoxesProps {
  /** "roles", "roles of Ines Varley". */
  legend: string;
  hideLegend?: boolean;
  value: readonly Role[];
  onChange: (roles: Role[]) => void;
  /** Which are offered; all, unless somebody may give only what they hold. */
  offered?: readonly Role[];
  /** Each with its sentence, one under the other; else in a row. */
  explained?: boolean;
  /** Boxes that cannot be changed now; the reason stands in the element of this id. */
  locked?: { roles: readonly Role[]; reasonId: string } | undefined;
  disabled?: boolean;
  error?: string | undefined;
}

/** Roles as boxes. */
export function RoleBoxes({
  legend,
  hideLegend = false,
  value,
  onChange,
  offered = ROLES,
  explained = false,
  locked,
  disabled = false,
  error,
}: RoleBoxesProps) {
  const id = useId();
  const toggle = (role: Role, on: boolean): void =>
    onChange(ROLES.filter((other) => (other === role ? on : value.includes(other))));
  return (
    <fieldset aria-describedby={error === undefined ? undefined : `${id}error`}>
      <legend className={hideLegend ? "sr-only" : "figures mb-1 text-label font-medium text-ink-2"}>
        {legend}
      </legend>
      <div className={explained ? "grid gap-2" : "flex flex-wrap gap-x-5 gap-y-1"}>
        {offered.map((role) => {
          const shut = locked?.roles.includes(role) === true;
          return (
            <div key={role}>
              <Checkbox
                checked={value.includes(role)}
                disabled={disabled || shut}
                onChange={(event) => toggle(role, event.target.checked)}
                aria-describedby={shut ? locked.reasonId : explained ? `${id}${role}` : undefined}
                className={joinClasses(explained && "font-semibold")}
              >
                {role}
              </Checkbox>
              {explained && (
                <p id={`${id}${role}`} className="pl-[25px] text-small text-ink-2 max-md:-mt-2.5">
                  {ROLE_SENTENCES[role]}
                </p>
              )}
            </div>
          );
        })}
      </div>
      {error !== undefined && (
        <p id={`${id}error`} className="mt-1 text-[14px]/[19px] text-fault">
          {error}
        </p>
      )}
    </fieldset>
  );
}
