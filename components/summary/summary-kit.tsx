"use client";

import { useQuery } from "@tanstack/react-query";
import { useId, type ReactNode } from "react";
import type { PublicationView, SummaryKit } from "@/lib/api/publications";
import { Moment } from "../frame/moment";
import { useNow } from "../frame/use-now";
import { Button, LinkButton } from "../parts/button";
import { CopyButton } from "../parts/copy-button";
import { FaultBar } from "../parts/fault-bar";
import { LoadingState } from "../parts/states";
import { summaryKitQuery } from "../queries/publications";

interface SummaryKitSectionProps {
  seriesId: string;
  /** The live one. */
  publication: PublicationView;
}

/** What a reviewer takes to the article: card, pictures, report, values and words of the live revision. */
export function SummaryKitSection({ seriesId, publication }: SummaryKitSectionProps) {
  const kit = useQuery(summaryKitQuery(seriesId, publication.id));
  return (
    <section aria-labelledby="kit">
      <h2 id="kit">Take it to the article</h2>
      <p className="mt-1 text-ink-2">
        Card, pictures, report and values of revision {publication.revision}; they stay on it and
        say when it was replaced or withdrawn.
      </p>
      {kit.isError ? (
        <FaultBar
          title="The kit could not be read"
          actions={<Button onClick={() => void kit.refetch()}>Try again</Button>}
        >
          {kit.error.message}
        </FaultBar>
      ) : kit.data === undefined ? (
        <LoadingState label="Loading the kit" onRetry={() => void kit.refetch()} />
      ) : (
        <Kit kit={kit.data} path={publication.path} />
      )}
    </section>
  );
}

function Kit({ kit, path }: { kit: SummaryKit; path: string }) {
  const id = useId();
  const now = useNow();
  const held = kit.embargo_until !== null && now !== null && new Date(kit.embargo_until) > now;
  const out = !held;
  const { files, embed } = kit;
  const wideId = `${id}wide`;
  return (
    <>
      {out ? (
        <Cards path={path} height={kit.narrow_height} />
      ) : (
        <p className="mt-3 font-semibold">
          Its addresses open when the embargo ends, <Moment at={kit.embargo_until ?? ""} />.
        </p>
      )}
      <dl className="mt-4 border-t border-ink">
        <Row name="Card" holds="HTML, light or dark, 640 × 360 or 320 wide">
          <CopyButton text={embed.wide} markId={wideId}>
            Copy code
          </CopyButton>
          <CopyButton text={embed.narrow} markId={`${id}narrow`}>
            Copy code, 320 wide
          </CopyButton>
        </Row>
        <Row name="Image" holds="the same, 1280 × 720; SVG with text as outlines">
          <File out={out} href={files.png}>
            PNG
          </File>
          <File out={out} href={files.svg}>
            SVG
          </File>
        </Row>
        <Row name="Report" holds="one page: answer, figure, compression map, method">
          <File out={out} href={files.pdf_a4}>
            PDF, A4
          </File>
          <File out={out} href={files.pdf_letter}>
            PDF, Letter
          </File>
        </Row>
        <Row name="Data" holds="all values of every band, notice, method line">
          <File out={out} href={files.csv}>
            CSV
          </File>
          <File out={out} href={files.json}>
            JSON
          </File>
        </Row>
      </dl>
      <Words id={`${id}sentence`} name="sentence for the article" text={kit.sentence}>
        Copy sentence
      </Words>
      <Words id={`${id}alt`} name="alt text of the picture" text={kit.alt_text}>
        Copy alt text
      </Words>
      <Words id={wideId} name="code for the card" text={embed.wide} code />
      <Words id={`${id}narrow`} name="code for the card, 320 wide" text={embed.narrow} code />
      <p className="mt-2 text-small text-ink-2">
        The card follows the reader’s light or dark setting; add ?theme=light or ?theme=dark to its
        address to fix it. A pasted link to the page unfolds by itself where oEmbed is known.
      </p>
    </>
  );
}

/** As it will stand in the article; the wide one needs the room of a desk. */
function Cards({ path, height }: { path: string; height: number }) {
  return (
    <div className="mt-3 flex flex-wrap items-start gap-3 bg-wash p-2">
      <iframe
        className="max-md:hidden"
        src={`${path}/card`}
        width={640}
        height={360}
        title="The card, 640 by 360"
        loading="lazy"
        sandbox="allow-same-origin allow-popups"
      />
      <iframe
        src={`${path}/card`}
        width={320}
        height={height}
        title="The card, 320 wide"
        loading="lazy"
        sandbox="allow-same-origin allow-popups"
      />
    </div>
  );
}

function Row({ name, holds, children }: { name: string; holds: string; children: ReactNode }) {
  return (
    <div className="flex flex-wrap items-center gap-x-4 gap-y-2 border-b border-rule py-2.5">
      <dt className="w-20 font-semibold">{name}</dt>
      <dd className="figures mr-auto min-w-0 text-small text-ink-2">{holds}</dd>
      <dd className="flex flex-wrap gap-2">{children}</dd>
    </div>
  );
}

/** Before the embargo ends there is nothing to fetch. */
function File({ out, href, children }: { out: boolean; href: string; children: string }) {
  return out ? (
    <LinkButton size="small" href={href} download>
      {children}
    </LinkButton>
  ) : (
    <span className="text-small text-ink-2">{children}</span>
  );
}

interface WordsProps {
  id: string;
  name: string;
  text: string;
  code?: boolean;
  /** Words of the button; the codes are copied by the row of the card. */
  children?: string;
}

function Words({ id, name, text, code = false, children }: WordsProps) {
  return (
    <div className="mt-4">
      <h3 className="figures text-label font-medium text-ink-2">{name}</h3>
      <p
        id={id}
        className={`mt-1 border border-edge bg-sheet px-3 py-2 ${code ? "figures text-small break-all" : ""}`}
      >
        {text}
      </p>
      {children !== undefined && (
        <p className="mt-1.5">
          <CopyButton text={text} markId={id} tone="quiet">
            {children}
          </CopyButton>
        </p>
      )}
    </div>
  );
}
