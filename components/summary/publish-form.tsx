"use client";

import { useState, type SyntheticEvent } from "react";
import type { MakerComment, PublicationView } from "@/lib/api/publications";
import { toSlug } from "@/lib/publication/addresses";
import { Button } from "../parts/button";
import { Checkbox } from "../parts/checkbox";
import { Field, TextArea, TextInput } from "../parts/field";
import { usePublish, type PublishBody } from "../queries/publications";

interface PublishFormProps {
  seriesId: string;
  /** The newest revision; null before the first. */
  latest: PublicationView | null;
  comments: readonly MakerComment[];
}

/** What the reviewer adds; the figures come from the signed analysis alone. */
export function PublishForm({ seriesId, latest, comments }: PublishFormProps) {
  const publish = usePublish(seriesId);
  const [fault, setFault] = useState<string | null>(null);
  const said = comments.at(-1);
  const send = (event: SyntheticEvent<HTMLFormElement>): void => {
    event.preventDefault();
    const body = readPublishForm(new FormData(event.currentTarget));
    if (typeof body === "string") {
      setFault(body);
      return;
    }
    setFault(null);
    publish.mutate(body);
  };
  const problem = fault ?? publish.error?.message ?? null;
  return (
    <form onSubmit={send} className="space-y-4" aria-labelledby="publish">
      <h2 id="publish">{latest === null ? "Publish" : "Publish a correction"}</h2>
      <p className="text-small text-ink-2">
        {latest === null
          ? "A revision is never changed in place; corrections are new revisions."
          : `Revision ${latest.revision} stays at its address and says what replaced it.`}
      </p>
      {latest !== null && (
        <Field label="what changed, for readers">
          {(props) => (
            <TextArea {...props} name="change_note" required minLength={3} maxLength={1000} />
          )}
        </Field>
      )}
      <Field
        label="who supplied the unit"
        hint="For example: bought by the lab, lent by the maker."
      >
        {(props) => (
          <TextInput {...props} name="supplied_by" required minLength={3} maxLength={200} />
        )}
      </Field>
      <Field
        label="your words to readers"
        hint="They stand under the figures; a blank line parts paragraphs."
      >
        {(props) => <TextArea {...props} name="words" rows={4} maxLength={5000} />}
      </Field>
      {latest === null && (
        <>
          <Field
            label="address, last part"
            hint="Small letters, figures and hyphens; empty: the model's name."
          >
            {(props) => <TextInput {...props} name="slug" figures maxLength={80} />}
          </Field>
          <Field label="embargo until" hint="Your own time; empty: out at once.">
            {(props) => <TextInput {...props} name="embargo" type="datetime-local" figures />}
          </Field>
        </>
      )}
      <fieldset className="space-y-3 border-t border-rule pt-3">
        <legend className="figures float-left mb-2 w-full text-label font-medium text-ink-2">
          the maker&rsquo;s statement, beside the result
        </legend>
        <Field label="name" className="clear-both">
          {(props) => (
            <TextInput {...props} name="maker_name" maxLength={200} defaultValue={said?.name} />
          )}
        </Field>
        <Field label="words" hint="Both empty: none is printed.">
          {(props) => (
            <TextArea
              {...props}
              name="maker_words"
              rows={3}
              maxLength={5000}
              defaultValue={said?.words}
            />
          )}
        </Field>
        <Field label="the lab's answer">
          {(props) => (
            <TextArea
              {...props}
              name="answer"
              rows={2}
              maxLength={5000}
              defaultValue={said?.answer ?? ""}
            />
          )}
        </Field>
      </fieldset>
      <Checkbox name="evidence" defaultChecked={latest?.evidence_public ?? false}>
        Give readers the recordings and decisions, so that they can check the result themselves
      </Checkbox>
      <Checkbox name="check" required>
        I have read the answer beside as readers will see it
      </Checkbox>
      {problem !== null && (
        <p role="alert" className="text-fault">
          {problem}
        </p>
      )}
      <Button type="submit" tone="decision" size="form" busy={publish.isPending}>
        {latest === null ? "Publish" : `Publish revision ${latest.revision + 1}`}
      </Button>
    </form>
  );
}

const text = (form: FormData, name: string): string => {
  const value = form.get(name);
  return typeof value === "string" ? value.trim() : "";
};

/** @returns what to send, or what is missing. */
export function readPublishForm(form: FormData): PublishBody | string {
  const [makerName, makerWords] = [text(form, "maker_name"), text(form, "maker_words")];
  if ((makerName === "") !== (makerWords === "")) {
    return "The maker's statement needs a name and words, or neither.";
  }
  const slug = text(form, "slug");
  if (slug !== "" && slug !== toSlug(slug)) {
    return `The address takes small letters, figures and hyphens, for example ${toSlug(slug)}.`;
  }
  const embargo = text(form, "embargo");
  const note = text(form, "change_note");
  const answer = text(form, "answer");
  return {
    words: text(form, "words"),
    supplied_by: text(form, "supplied_by"),
    maker_statement: makerName === "" ? null : { name: makerName, words: makerWords },
    answer_to_maker: makerName === "" || answer === "" ? null : answer,
    ...(slug === "" ? {} : { slug }),
    embargo_until: embargo === "" ? null : new Date(embargo).toISOString(),
    change_note: note === "" ? null : note,
    evidence_public: text(form, "evidence") !== "",
  };
}
