import { Brand } from "@/components/frame/brand";
import { LinkButton } from "@/components/parts/button";

export default function NotFound() {
  return (
    <main className="mx-auto max-w-[640px] px-gutter py-16 max-md:px-phone max-md:py-9">
      <Brand />
      <h1 className="mt-9">There is nothing at this address</h1>
      <p className="mt-2 text-ink-2">
        It may belong to another lab, or it was removed. Check the address, or go on from the list
        of series.
      </p>
      <p className="mt-5">
        <LinkButton href="/series" tone="main">
          Go to the series
        </LinkButton>
      </p>
    </main>
  );
}
