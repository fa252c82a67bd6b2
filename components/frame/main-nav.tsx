"use client";

import Link from "next/link";
import { usePathname } from "next/navigation";
import { joinClasses } from "../parts/join-classes";

export interface NavItem {
  href: string;
  label: string;
  /** Addresses that belong to the same room. */
  also?: readonly string[];
}

/** The rooms of the lab; the one that the address lies in is marked. */
export function MainNav({ items }: { items: readonly NavItem[] }) {
  const path = usePathname();
  return (
    <nav aria-label="Main" className="flex h-full w-max gap-[22px] self-stretch max-md:gap-4">
      {items.map((item) => {
        const here = [item.href, ...(item.also ?? [])].some(
          (room) => path === room || path.startsWith(`${room}/`),
        );
        return (
          <Link
            key={item.href}
            href={item.href}
            aria-current={here ? "page" : undefined}
            className={joinClasses(
              "flex items-center border-b-3 pt-[3px] no-underline max-md:-outline-offset-3",
              here
                ? "border-ink font-semibold text-ink"
                : "border-transparent text-ink-2 hover:border-rule hover:text-ink",
            )}
          >
            {item.label}
          </Link>
        );
      })}
    </nav>
  );
}
