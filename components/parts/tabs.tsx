"use client";

import Link from "next/link";
import { usePathname } from "next/navigation";
import { joinClasses } from "./join-classes";

export interface TabItem {
  href: string;
  label: string;
}

interface TabsProps {
  /** "Views of this series". */
  label: string;
  tabs: readonly TabItem[];
  className?: string;
}

/** Views of one thing, each with its own address. The current one is the address that we are at. */
export function Tabs({ label, tabs, className }: TabsProps) {
  const path = usePathname();
  return (
    <nav
      aria-label={label}
      className={joinClasses(
        "flex items-baseline gap-x-[17px] overflow-x-auto overflow-y-hidden max-md:-mx-phone max-md:px-phone",
        className,
      )}
    >
      {tabs.map((tab) => {
        const current = path === tab.href;
        return (
          <Link
            key={tab.href}
            href={tab.href}
            aria-current={current ? "page" : undefined}
            className={joinClasses(
              "border-b-3 py-[3px] leading-6 whitespace-nowrap no-underline max-md:py-2.5",
              current
                ? "border-ink text-[19px] font-[680] text-ink"
                : "border-transparent text-[16px] text-ink-2 hover:border-rule hover:text-ink",
            )}
          >
            {tab.label}
          </Link>
        );
      })}
    </nav>
  );
}
