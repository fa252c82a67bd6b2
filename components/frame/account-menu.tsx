"use client";

import Link from "next/link";
import { DropdownMenu } from "radix-ui";
import type { Role } from "@/lib/roles/roles";
import { joinClasses } from "../parts/join-classes";

export interface LabChoice {
  id: string;
  name: string;
}

interface AccountMenuProps {
  name: string;
  roles: readonly Role[];
  lab: LabChoice;
  /** Every lab of the account, the present one too. */
  labs: readonly LabChoice[];
  onSwitchLab: (labId: string) => void;
  onSignOut: () => void;
}

const ITEM =
  "flex min-h-9 items-center gap-2.5 px-3 py-1.5 no-underline outline-none select-none data-highlighted:bg-wash max-md:min-h-11";

/** Who is signed in, in which lab; the switch between labs, the account, the way out. */
export function AccountMenu({ name, roles, lab, labs, onSwitchLab, onSignOut }: AccountMenuProps) {
  return (
    <DropdownMenu.Root modal={false}>
      <DropdownMenu.Trigger className="flex min-h-9 items-center gap-2.5 rounded-control px-1 text-small whitespace-nowrap text-ink-2 hover:text-ink max-md:min-h-11">
        <span className="max-w-40 truncate">{name}</span>
        <span className="figures text-label max-sm:sr-only">{roles.join(", ")}</span>
        <svg width="10" height="7" viewBox="0 0 10 7" aria-hidden="true">
          <path d="M1 1.2 5 5.4 9 1.2" fill="none" stroke="currentColor" strokeWidth="1.6" />
        </svg>
      </DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content
          align="end"
          sideOffset={6}
          className="z-30 min-w-56 border border-edge bg-sheet py-1.5 text-body text-ink shadow-tray"
        >
          <DropdownMenu.Label className="figures px-3 pt-1 pb-1.5 text-label text-ink-2">
            {labs.length > 1 ? "lab" : lab.name}
          </DropdownMenu.Label>
          {labs.length > 1 && (
            <DropdownMenu.RadioGroup value={lab.id} onValueChange={onSwitchLab}>
              {labs.map((choice) => (
                <DropdownMenu.RadioItem key={choice.id} value={choice.id} className={ITEM}>
                  <span
                    aria-hidden="true"
                    className={joinClasses(
                      "size-2.5 rounded-full border border-edge",
                      choice.id === lab.id && "border-ink bg-ink",
                    )}
                  />
                  {choice.name}
                </DropdownMenu.RadioItem>
              ))}
            </DropdownMenu.RadioGroup>
          )}
          <DropdownMenu.Separator className="my-1.5 border-t border-rule" />
          <DropdownMenu.Item asChild>
            <Link href="/account" className={ITEM}>
              Account
            </Link>
          </DropdownMenu.Item>
          <DropdownMenu.Item className={joinClasses(ITEM, "cursor-pointer")} onSelect={onSignOut}>
            Sign out
          </DropdownMenu.Item>
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}
