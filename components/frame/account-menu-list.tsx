"use client";

import Link from "next/link";
import { DropdownMenu } from "radix-ui";
import { joinClasses } from "../parts/join-classes";

import { TriggerFace, TRIGGER, type AccountMenuProps } from "./account-trigger";

const ITEM =
  "flex min-h-9 items-center gap-2.5 px-3 py-1.5 no-underline outline-none select-none data-highlighted:bg-wash max-md:min-h-11";

/** The menu itself; it comes when somebody opens it, and stands open then. */
export function AccountMenuList({
  name,
  roles,
  lab,
  labs,
  onSwitchLab,
  onSignOut,
}: AccountMenuProps) {
  return (
    <DropdownMenu.Root modal={false} defaultOpen>
      <DropdownMenu.Trigger className={TRIGGER}>
        <TriggerFace name={name} roles={roles} />
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
