import { Button } from "../parts/button";
import { formatCount } from "@/lib/charts/format";
import { PAGE_SIZE } from "./list-address";

interface PageTurnerProps {
  page: number;
  found: number;
  onTurn: (page: number) => void;
}

/** "26 to 50 of 240", and the way there and back. Nothing where one page holds all. */
export function PageTurner({ page, found, onTurn }: PageTurnerProps) {
  const pages = Math.max(1, Math.ceil(found / PAGE_SIZE));
  if (pages === 1) return null;
  const first = (page - 1) * PAGE_SIZE + 1;
  const last = Math.min(found, page * PAGE_SIZE);
  return (
    <nav
      aria-label="Pages of the list"
      className="flex flex-wrap items-center gap-3 px-gutter py-4 max-md:px-phone"
    >
      <p className="figures mr-auto text-label text-ink-2">
        {first > found
          ? `no page ${page}`
          : `${formatCount(first)} to ${formatCount(last)} of ${formatCount(found)}`}
      </p>
      <Button size="small" disabled={page <= 1} onClick={() => onTurn(Math.min(page - 1, pages))}>
        Previous
      </Button>
      <span className="figures text-label text-ink-2">
        page {formatCount(page)} of {formatCount(pages)}
      </span>
      <Button size="small" disabled={page >= pages} onClick={() => onTurn(page + 1)}>
        Next
      </Button>
    </nav>
  );
}
