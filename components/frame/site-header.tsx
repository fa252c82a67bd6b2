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

/** One line on a desk; on a phone the rooms move under the name, side by side in a strip that scrolls. */
export function SiteHeader({ items, account }: SiteHeaderProps) {
  return (
    <header className="border-b border-rule bg-page">
      <a
        href="#content"
        className="absolute left-2 z-20 -translate-y-20 bg-ink px-3 py-2 text-on-ink focus:translate-y-2"
      >
        To the content
      </a>
      <div className="mx-auto grid max-w-page grid-cols-[auto_minmax(0,1fr)_auto] items-center gap-x-7 px-gutter max-md:gap-x-3.5 max-md:px-phone md:h-[52px] md:grid-cols-[auto_1fr_auto_auto]">
        <Link href="/series" className="flex min-h-11 items-center no-underline">
          <Brand />
        </Link>
        <div className="h-[46px] min-w-0 max-md:order-last max-md:col-span-3 max-md:overflow-x-auto max-md:[scrollbar-width:none] md:h-full">
          <MainNav items={items} />
        </div>
        <SearchBox className="max-md:z-10 max-md:justify-self-end max-md:pt-1" />
        <div className="max-md:justify-self-end">{account}</div>
      </div>
    </header>
  );
}
