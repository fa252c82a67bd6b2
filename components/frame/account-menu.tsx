"use client";

import { useState, type ComponentType, type KeyboardEvent } from "react";
import { type AccountMenuProps, TRIGGER, TriggerFace } from "./account-trigger";

/**
 * Who is signed in, in which lab; the switch between labs, the account, the way out. Most pages are
 * left without a look at it: its script comes when a hand or the focus nears.
 */
export function AccountMenu(props: AccountMenuProps) {
  const [asked, setAsked] = useState(false);
  const [List, setList] = useState<ComponentType<AccountMenuProps> | null>(null);
  const load = (): void => {
    import("./account-menu-list").then(
      (module) => setList(() => module.AccountMenuList),
      // The next look tries again.
      () => setAsked(false),
    );
  };
  const open = (): void => {
    load();
    setAsked(true);
  };
  const openByArrow = (event: KeyboardEvent): void => {
    if (event.key !== "ArrowDown") return;
    event.preventDefault();
    open();
  };
  if (asked && List !== null) return <List {...props} />;
  return (
    <button
      type="button"
      aria-haspopup="menu"
      aria-expanded={false}
      className={TRIGGER}
      onPointerEnter={load}
      onFocus={load}
      onKeyDown={openByArrow}
      onClick={open}
    >
      <TriggerFace name={props.name} roles={props.roles} />
    </button>
  );
}
