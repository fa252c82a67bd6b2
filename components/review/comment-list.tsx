"use client";

import { useState, type FormEvent } from "react";
import { formatFrequency } from "@/lib/charts/format";
import type { BandComment } from "@/lib/review/review-schema";
import { toMoment } from "@/lib/time/time-words";
import { useLabZone } from "../frame/lab-session";
import { useNow } from "../frame/use-now";
import { Button } from "../parts/button";
import { Field, TextArea } from "../parts/field";
import { useWriteComment } from "../queries/review";

interface CommentListProps {
  seriesId: string;
  analysisId: string;
  nominalHz: number;
  comments: readonly BandComment[];
  mayDecide: boolean;
}

/** What was said on the selected band, and on the series as a whole. */
export function CommentList({
  seriesId,
  analysisId,
  nominalHz,
  comments,
  mayDecide,
}: CommentListProps) {
  const zone = useLabZone();
  const now = useNow();
  const [words, setWords] = useState("");
  const write = useWriteComment({ seriesId, analysisId });
  const shown = comments.filter((one) => one.nominal_Hz === nominalHz || one.nominal_Hz === null);
  if (!mayDecide && shown.length === 0) return null;
  const send = (event: FormEvent): void => {
    event.preventDefault();
    if (words.trim() === "") return;
    write.mutate({ nominal_Hz: nominalHz, words: words.trim() }, { onSuccess: () => setWords("") });
  };
  return (
    <section aria-label="Comments" className="border-t border-rule py-3">
      <h3>Comments</h3>
      <ul className="mt-1.5 grid gap-2 text-small">
        {shown.map((comment) => (
          <li key={comment.id}>
            <span className="figures block text-label text-ink-2">
              {comment.by.name}, {toMoment(comment.at, now, zone)}
              {comment.nominal_Hz === null ? ", on the series" : ""}
            </span>
            {comment.words}
          </li>
        ))}
      </ul>
      {mayDecide && (
        <form onSubmit={send} className="mt-2">
          <Field label={`comment on ${formatFrequency(nominalHz)}`} error={write.error?.message}>
            {(control) => (
              <TextArea
                {...control}
                rows={2}
                maxLength={2000}
                value={words}
                onChange={(event) => setWords(event.target.value)}
              />
            )}
          </Field>
          <Button type="submit" size="small" className="mt-2" busy={write.isPending}>
            Comment
          </Button>
        </form>
      )}
    </section>
  );
}
