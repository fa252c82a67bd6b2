"use client";

import { useState, type SyntheticEvent } from "react";
import type { MakerComment } from "@/lib/api/publications";
import { Moment } from "../frame/moment";
import { Button } from "../parts/button";
import { Field, TextArea } from "../parts/field";
import { useAnswerMaker } from "../queries/publications";

interface MakerCommentsProps {
  seriesId: string;
  /** Oldest first. */
  comments: readonly MakerComment[];
  mayAnswer: boolean;
}

/** What the maker said through a preview link, and what the lab answered. */
export function MakerComments({ seriesId, comments, mayAnswer }: MakerCommentsProps) {
  if (comments.length === 0) return null;
  return (
    <section aria-labelledby="maker-comments">
      <h2 id="maker-comments">The maker&rsquo;s comments</h2>
      <ul className="mt-2">
        {comments.map((comment) => (
          <li key={comment.id} className="border-t border-rule py-3">
            <p className="text-small text-ink-2">
              <b>{comment.name}</b>, {comment.email}, <Moment at={comment.at} />
            </p>
            <p className="max-w-prose whitespace-pre-line">{comment.words}</p>
            {comment.answer !== null && (
              <div className="mt-2 border-l-4 border-edge pl-4">
                <p className="text-small text-ink-2">
                  answered by {comment.answered_by?.name ?? "somebody"}
                </p>
                <p className="max-w-prose whitespace-pre-line">{comment.answer}</p>
              </div>
            )}
            {mayAnswer && <AnswerForm seriesId={seriesId} comment={comment} />}
          </li>
        ))}
      </ul>
    </section>
  );
}

function AnswerForm({ seriesId, comment }: { seriesId: string; comment: MakerComment }) {
  const [open, setOpen] = useState(false);
  const answer = useAnswerMaker(seriesId);
  if (!open) {
    return (
      <Button size="small" className="mt-2" onClick={() => setOpen(true)}>
        {comment.answer === null ? `Answer ${comment.name}` : "Change the answer"}
      </Button>
    );
  }
  const send = (event: SyntheticEvent<HTMLFormElement>): void => {
    event.preventDefault();
    const words = new FormData(event.currentTarget).get("answer");
    answer.mutate(
      { commentId: comment.id, answer: typeof words === "string" ? words : "" },
      { onSuccess: () => setOpen(false) },
    );
  };
  return (
    <form onSubmit={send} className="mt-2 max-w-prose space-y-2">
      <Field label={`answer to ${comment.name}, seen through the link`}>
        {(props) => (
          <TextArea
            {...props}
            name="answer"
            rows={3}
            required
            maxLength={5000}
            defaultValue={comment.answer ?? ""}
          />
        )}
      </Field>
      {answer.isError && (
        <p role="alert" className="text-fault">
          {answer.error.message}
        </p>
      )}
      <div className="flex gap-2.5">
        <Button type="submit" tone="decision" busy={answer.isPending}>
          Send the answer
        </Button>
        <Button onClick={() => setOpen(false)}>Cancel</Button>
      </div>
    </form>
  );
}
