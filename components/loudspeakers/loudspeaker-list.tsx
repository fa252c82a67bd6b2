"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import { parseAsString, useQueryState } from "nuqs";
import type { Loudspeaker } from "@/lib/api/loudspeakers";
import { formatPlain, NBSP } from "@/lib/charts/format";
import { PageHead } from "../frame/page-head";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { TextInput } from "../parts/field";
import { EmptyState, LoadingState } from "../parts/states";
import { NoValue, Table, TableFrame, Td, Th, Tr } from "../parts/table";
import { loudspeakerListQuery } from "../queries/loudspeakers";

/** Every loudspeaker of the lab, with the series that were made of it. */
export function LoudspeakerList({ mayCapture }: { mayCapture: boolean }) {
  const [search, setSearch] = useQueryState("search", parseAsString.withDefault(""));
  const list = useQuery(loudspeakerListQuery(search.slice(0, 120)));
  const loudspeakers = list.data?.loudspeakers ?? [];
  const nothingYet = list.data !== undefined && loudspeakers.length === 0 && search === "";
  const enter = mayCapture && (
    <LinkButton href="/loudspeakers/new" tone="main">
      New loudspeaker
    </LinkButton>
  );
  return (
    <>
      <PageHead title="Loudspeakers" aside={!nothingYet && enter} />
      <div className="pb-8">
        {nothingYet ? (
          <div className="px-gutter max-md:px-phone">
            <EmptyState title="No loudspeakers yet" actions={enter}>
              A loudspeaker is entered once, with its maker, model and serial number; its series
              follow. {!mayCapture && "A tester enters loudspeakers."}
            </EmptyState>
          </div>
        ) : (
          <>
            <div className="px-gutter pb-3.5 max-md:px-phone">
              <TextInput
                size="normal"
                type="search"
                aria-label="Filter by name or maker"
                placeholder="Name or maker"
                maxLength={120}
                className="w-[190px] max-md:w-full"
                value={search}
                onChange={(event) => void setSearch(event.target.value, { throttleMs: 200 })}
              />
            </div>
            {list.isPending && (
              <div className="px-gutter max-md:px-phone">
                <LoadingState label="Loading the loudspeakers" />
              </div>
            )}
            {list.isError && list.data === undefined && (
              <div className="px-gutter max-md:px-phone">
                <FaultBar
                  title="The loudspeakers could not be read"
                  actions={<Button onClick={() => void list.refetch()}>Try again</Button>}
                >
                  {list.error.message}
                </FaultBar>
              </div>
            )}
            {loudspeakers.length > 0 && <LoudspeakerTable loudspeakers={loudspeakers} />}
            {list.data !== undefined && loudspeakers.length === 0 && (
              <div className="px-gutter max-md:px-phone">
                <EmptyState
                  title={`No loudspeaker matches “${search}”`}
                  actions={<Button onClick={() => void setSearch(null)}>Clear the name</Button>}
                >
                  Names, makers and serial numbers are searched.
                </EmptyState>
              </div>
            )}
          </>
        )}
      </div>
    </>
  );
}

function LoudspeakerTable({ loudspeakers }: { loudspeakers: readonly Loudspeaker[] }) {
  return (
    <TableFrame label="Loudspeakers">
      <Table className="border-x-0">
        <caption className="sr-only">Loudspeakers of the lab</caption>
        <thead>
          <tr>
            <Th className="pl-gutter! max-md:pl-phone!">Loudspeaker</Th>
            <Th className="max-md:hidden">Serial number</Th>
            <Th className="max-md:hidden" right>
              Largest dimension, m
            </Th>
            <Th className="max-md:hidden" right>
              Port tuning, Hz
            </Th>
            <Th right className="pr-gutter! max-md:pr-phone!">
              Series
            </Th>
          </tr>
        </thead>
        <tbody>
          {loudspeakers.map((loudspeaker) => (
            <Tr key={loudspeaker.id} height="list">
              <Td className="pl-gutter! max-md:pl-phone!">
                <span className="flex items-center gap-3.5">
                  <Thumbnail loudspeaker={loudspeaker} />
                  <span>
                    <Link
                      href={`/loudspeakers/${loudspeaker.id}`}
                      className="block text-[16px]/5 font-[680] no-underline hover:underline"
                    >
                      {loudspeaker.model}
                    </Link>
                    <span className="block text-[13px]/[18px] text-ink-2">
                      {loudspeaker.maker}, {loudspeaker.kind}
                    </span>
                  </span>
                </span>
              </Td>
              <Td figures className="max-md:hidden">
                {loudspeaker.serial === "" ? <NoValue say="not given" /> : loudspeaker.serial}
              </Td>
              <Td figures right className="max-md:hidden">
                <Figure value={loudspeaker.largest_dimension_m} />
              </Td>
              <Td figures right className="max-md:hidden">
                <Figure value={loudspeaker.tuning_Hz} />
              </Td>
              <Td figures right className="pr-gutter! max-md:pr-phone!">
                {loudspeaker.series_count === 0 ? (
                  "0"
                ) : (
                  <Link href={`/series?loudspeaker=${loudspeaker.id}`}>
                    {loudspeaker.series_count}
                    <span className="sr-only">
                      {NBSP}series of {loudspeaker.model}
                    </span>
                  </Link>
                )}
              </Td>
            </Tr>
          ))}
        </tbody>
      </Table>
    </TableFrame>
  );
}

function Figure({ value }: { value: number | null }) {
  return value === null ? <NoValue say="not known" /> : formatPlain(value);
}

function Thumbnail({ loudspeaker }: { loudspeaker: Loudspeaker }) {
  if (loudspeaker.photo_url === null) {
    return <span aria-hidden="true" className="size-9 flex-none border border-rule bg-wash" />;
  }
  return (
    // A photo of the lab behind its own sign-in: the optimiser cannot fetch it.
    // oxlint-disable-next-line nextjs/no-img-element
    <img
      src={loudspeaker.photo_url}
      alt=""
      loading="lazy"
      className="size-9 flex-none border border-rule object-cover"
    />
  );
}
