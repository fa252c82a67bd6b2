import { ROLES } from "@/lib/roles/roles";
import { Sheet } from "../parts/section";
import { ROLE_SENTENCES } from "./role-words";

/** What each role may do, for those who do not give roles. */
export function RoleKey() {
  return (
    <Sheet>
      <h2>What each role may do</h2>
      <dl className="mt-2 grid gap-2.5">
        {ROLES.map((role) => (
          <div key={role}>
            <dt className="font-semibold">{role}</dt>
            <dd className="text-small text-ink-2">{ROLE_SENTENCES[role]}</dd>
          </div>
        ))}
      </dl>
      <p className="mt-3 border-t border-rule pt-3 text-small text-ink-2">
        Everybody sees everything in the lab. An admin gives roles, to one person as many as needed.
      </p>
    </Sheet>
  );
}
