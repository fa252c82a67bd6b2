"use client";

import { Brand } from "@/components/frame/brand";
import { Button, LinkButton } from "@/components/parts/button";
import { FaultBar } from "@/components/parts/fault-bar";

/** The server's own words stay in its log; the report number leads there. */
export default function ErrorPage({
  error,
  reset,
}: {
  error: Error & { digest?: string };
  reset: () => void;
}) {
  return (
    <main className="mx-auto max-w-[640px] px-gutter py-16 max-md:px-phone max-md:py-9">
      <Brand />
      <FaultBar
        className="mt-9"
        title="This page could not be made"
        report={error.digest === undefined ? undefined : `report ${error.digest}`}
        actions={
          <>
            <Button tone="main" onClick={reset}>
              Try again
            </Button>
            <LinkButton href="/series" tone="quiet">
              Go to the series
            </LinkButton>
          </>
        }
      >
        Something went wrong on our side. Recordings and decisions that were saved are kept.
      </FaultBar>
    </main>
  );
}
