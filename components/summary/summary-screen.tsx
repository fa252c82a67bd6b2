"use client";

import { useQuery } from "@tanstack/react-query";
import type { Snapshot } from "@/lib/publication/snapshot-schema";
import { toReaderWall } from "@/lib/charts/reader-wall";
import { toAnswer, toLimitWords, toMethodWords, toPublishedNotice } from "@/lib/reader/page-words";
import { FigureSvg } from "../parts/figure-svg";
import { SlimNotice } from "../parts/notice";
import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { EmptyState, LoadingState } from "../parts/states";
import { draftQuery, previewsQuery, publicationsQuery } from "../queries/publications";
import { MakerComments } from "./maker-comments";
import { PreviewLinks } from "./preview-links";
import { PublishForm } from "./publish-form";
import { RevisionList } from "./revision-list";
import { SummaryKitSection } from "./summary-kit";
import { ApiProblem } from "@/lib/api/client";

interface SummaryScreenProps {
  seriesId: string;
  mayPublish: boolean;
}

/** What readers see of the series, or would: the answer, its revisions, the maker's part. */
export function SummaryScreen({ seriesId, mayPublish }: SummaryScreenProps) {
  const publications = useQuery(publicationsQuery(seriesId));
  const draft = useQuery(draftQuery(seriesId));
  const previews = useQuery(previewsQuery(seriesId));
  const failed = [publications, previews].find((query) => query.isError);
  if (failed?.error != null) {
    return (
      <div className="px-gutter py-6 max-md:px-phone">
        <FaultBar
          title="The summary could not be read"
          actions={<Button onClick={() => void failed.refetch()}>Try again</Button>}
        >
          {failed.error.message}
        </FaultBar>
      </div>
    );
  }
  if (publications.data === undefined || previews.data === undefined || draft.isPending) {
    return (
      <div className="px-gutter py-6 max-md:px-phone">
        <LoadingState label="Loading the summary" onRetry={() => void publications.refetch()} />
      </div>
    );
  }
  const revisions = publications.data.publications;
  const live = revisions.find((one) => one.state === "live");
  const { comments } = previews.data;
  const signed = draft.data !== undefined;
  return (
    <div className="border-t border-rule lg:grid lg:grid-cols-[minmax(0,1fr)_400px]">
      <div className="min-w-0 space-y-8 px-gutter py-6 max-md:px-phone">
        {draft.data === undefined ? (
          <NotSigned error={draft.error} published={revisions.length > 0} />
        ) : (
          <Answer snapshot={draft.data} published={revisions.length > 0} />
        )}
        {live !== undefined && <SummaryKitSection seriesId={seriesId} publication={live} />}
        <RevisionList seriesId={seriesId} revisions={revisions} mayPublish={mayPublish} />
        <MakerComments seriesId={seriesId} comments={comments} mayAnswer={mayPublish} />
      </div>
      <aside className="space-y-8 border-rule px-gutter py-6 max-lg:border-t max-md:px-phone lg:border-l">
        {mayPublish && signed && (
          <PublishForm
            key={revisions.length}
            seriesId={seriesId}
            latest={revisions[0] ?? null}
            comments={comments}
          />
        )}
        {!mayPublish && (
          <p className="text-ink-2">
            A reviewer publishes, corrects and withdraws, and makes preview links.
          </p>
        )}
        <PreviewLinks
          seriesId={seriesId}
          previews={previews.data.previews}
          mayMake={mayPublish && signed}
          mayRevoke={mayPublish}
        />
      </aside>
    </div>
  );
}

function NotSigned({ error, published }: { error: Error | null; published: boolean }) {
  const unsigned = error instanceof ApiProblem && error.code === "conflict.state";
  return (
    <EmptyState title={unsigned ? "Not ready to publish" : "The figures could not be read"}>
      {error?.message ?? "Try again in a minute."}
      {unsigned && published && " What is published stays as it is."}
    </EmptyState>
  );
}

/** The answer in the form that readers get. */
function Answer({ snapshot, published }: { snapshot: Snapshot; published: boolean }) {
  const [first, ...rest] = toAnswer(snapshot);
  const notice = toPublishedNotice(snapshot);
  const label = toAnswer(snapshot).join(" ");
  return (
    <section aria-labelledby="answer">
      <p className="figures text-label text-ink-2">
        {published ? "as the next revision would say it" : "as it would be published"}: analysis
        version {snapshot.analysis.version}, limit {toLimitWords(snapshot.criterion)}
      </p>
      <h2 id="answer" className="mt-1 text-[26px]/8">
        {first} <span className="text-ink-2">{rest.join(" ")}</span>
      </h2>
      <p className="mt-2 text-small text-ink-2">{toMethodWords(snapshot)}</p>
      {notice !== null && <SlimNotice notice={notice} className="mt-3" />}
      <section
        className="mt-3 overflow-x-auto bg-sheet p-3"
        // A figure wider than its place is reached by keyboard, too.
        // oxlint-disable-next-line jsx-a11y/no-noninteractive-tabindex
        tabIndex={0}
        aria-label="Output limit by band"
      >
        <FigureSvg
          figure={toReaderWall(snapshot, { width: 900, plotHeight: 300, narrow: false })}
          label={label}
        />
      </section>
    </section>
  );
}
