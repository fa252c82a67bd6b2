"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { ApiProblem } from "@/lib/api/client";
import type { Loudspeaker } from "@/lib/api/loudspeakers";
import { formatPlain, NBSP } from "@/lib/charts/format";
import { Moment } from "../frame/moment";
import { PageHead } from "../frame/page-head";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { StateSquares } from "../parts/state-boxes";
import { EmptyState, LoadingState } from "../parts/states";
import { loudspeakerQuery } from "../queries/loudspeakers";
import { seriesListQuery } from "../queries/series";
import { toRowHref } from "../series-list/row-href";
import { LoudspeakerForm } from "./loudspeaker-form";

interface LoudspeakerPageProps {
  loudspeakerId: string;
  mayCapture: boolean;
}

/** One loudspeaker: its particulars, its photo, its series. */
export function LoudspeakerPage({ loudspeakerId, mayCapture }: LoudspeakerPageProps) {
  const query = useQuery(loudspeakerQuery(loudspeakerId));
  if (query.data === undefined) {
    return (
      <div className="px-gutter py-6 max-md:px-phone">
        {query.isError ? (
          <LoudspeakerFault error={query.error} onRetry={() => void query.refetch()} />
        ) : (
          <LoadingState label="Loading the loudspeaker" onRetry={() => void query.refetch()} />
        )}
      </div>
    );
  }
  const loudspeaker = query.data;
  return (
    <>
      <PageHead
        crumb={{
          href: "/loudspeakers",
          label: "Loudspeakers",
          here: loudspeaker.serial === "" ? loudspeaker.model : loudspeaker.serial,
        }}
        title={loudspeaker.model}
        line={`${loudspeaker.maker} · ${loudspeaker.kind}`}
        aside={
          mayCapture && (
            <LinkButton href={`/series/new?loudspeaker=${loudspeaker.id}`} tone="main">
              New series
            </LinkButton>
          )
        }
      />
      <div className="grid gap-x-10 gap-y-8 px-gutter pb-8 max-md:px-phone lg:grid-cols-[minmax(0,1fr)_440px]">
        <section aria-labelledby="particulars" className="min-w-0">
          <h2 id="particulars" className="mb-3">
            Particulars
          </h2>
          {loudspeaker.photo_url !== null && (
            // A photo of the lab behind its own sign-in: the optimiser cannot fetch it.
            // oxlint-disable-next-line nextjs/no-img-element
            <img
              src={loudspeaker.photo_url}
              alt={`${loudspeaker.maker} ${loudspeaker.model}`}
              className="mb-4 max-h-72 w-auto max-w-full border border-rule"
            />
          )}
          {mayCapture ? (
            <LoudspeakerForm key={loudspeaker.id} loudspeaker={loudspeaker} />
          ) : (
            <Particulars loudspeaker={loudspeaker} />
          )}
        </section>
        <SeriesOf loudspeaker={loudspeaker} />
      </div>
    </>
  );
}

function Particulars({ loudspeaker }: { loudspeaker: Loudspeaker }) {
  const values = [
    ["serial number", loudspeaker.serial],
    ["largest dimension", withUnit(loudspeaker.largest_dimension_m, "m")],
    ["port tuning", withUnit(loudspeaker.tuning_Hz, "Hz")],
  ] as const;
  return (
    <dl className="grid grid-cols-2 gap-x-3.5 gap-y-3 sm:grid-cols-3">
      {values.map(([label, value]) => (
        <div key={label}>
          <dt className="figures text-label text-ink-2">{label}</dt>
          <dd>{value === "" ? "not given" : value}</dd>
        </div>
      ))}
    </dl>
  );
}

const withUnit = (value: number | null, unit: string): string =>
  value === null ? "" : `${formatPlain(value)}${NBSP}${unit}`;

function SeriesOf({ loudspeaker }: { loudspeaker: Loudspeaker }) {
  const list = useQuery(seriesListQuery({ loudspeaker: loudspeaker.id, page_size: 100 }));
  const rows = list.data?.series ?? [];
  return (
    <section
      aria-labelledby="its-series"
      className="self-start border border-rule bg-sheet px-[22px] pt-[18px] pb-[22px]"
    >
      <h2 id="its-series">Its series</h2>
      {list.data !== undefined && rows.length === 0 && <p className="mt-1 text-ink-2">None yet.</p>}
      {list.isError && (
        <p role="alert" className="mt-1 text-fault">
          {list.error.message}
        </p>
      )}
      <ul className="mt-2">
        {rows.map((row) => (
          <li
            key={row.id}
            className="flex flex-wrap items-start justify-between gap-3 border-t border-rule py-2"
          >
            <Link href={toRowHref(row)} className="figures text-figure">
              {row.number}
            </Link>
            <StateSquares state={row.state} note={row.state_detail} />
            <Moment at={row.changed_at} className="figures text-label text-ink-2" />
          </li>
        ))}
      </ul>
    </section>
  );
}

function LoudspeakerFault({ error, onRetry }: { error: Error; onRetry: () => void }) {
  if (error instanceof ApiProblem && error.code === "not-found") {
    return (
      <EmptyState
        title="There is no such loudspeaker in this lab"
        actions={<LinkButton href="/loudspeakers">To the list</LinkButton>}
      >
        It may belong to another of your labs.
      </EmptyState>
    );
  }
  return (
    <FaultBar
      title="The loudspeaker could not be read"
      actions={<Button onClick={onRetry}>Try again</Button>}
    >
      {error.message}
    </FaultBar>
  );
}
