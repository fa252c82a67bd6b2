import Link from "next/link";
import type { ReactNode } from "react";
import { Brand } from "./brand";
import { MainNav, type NavItem } from "./main-nav";
import { SearchBox } from "./search-box";

interface SiteHeaderProps {
  items: readonly NavItem[];
  /** `<AccountMenu />`. */
  account: ReactNode;
}

/** One line on a desk; on a phone the rooms move under the name. */
export function SiteHeader({ items, account }: SiteHeaderProps) {
  return (
    <header className="border-b border-rule bg-page">
      <a
        href="#content"
        className="absolute left-2 z-20 -translate-y-20 bg-ink px-3 py-2 text-on-ink focus:translate-y-2"
      >
        To the content
      </a>
      <div className="mx-auto grid max-w-page grid-cols-[auto_1fr_auto] items-center gap-x-7 px-gutter max-md:px-phone md:h-[52px] md:grid-cols-[auto_1fr_auto_auto]">
        <Link href="/series" className="flex min-h-11 items-center no-underline">
          <Brand />
        </Link>
        <div className="h-[46px] max-md:order-last max-md:col-span-2 md:h-full">
          <MainNav items={items} />
        </div>
        <SearchBox className="max-md:order-last max-md:justify-self-end max-md:pb-1" />
        <div className="max-md:col-span-2 max-md:justify-self-end">{account}</div>
      </div>
    </header>
  );
}
