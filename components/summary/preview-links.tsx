"use client";

import { useState, type SyntheticEvent } from "react";
import type { z } from "zod";
import type { previewViewSchema } from "@/lib/api/publications";
import { Moment } from "../frame/moment";
import { useNow } from "../frame/use-now";
import { ShownOnce } from "../lab/shown-once";
import { Button } from "../parts/button";
import { Field, TextInput } from "../parts/field";
import { useCreatePreview, useRevokePreview } from "../queries/publications";

type PreviewView = z.output<typeof previewViewSchema>;

interface PreviewLinksProps {
  seriesId: string;
  /** Newest first. */
  previews: readonly PreviewView[];
  mayMake: boolean;
  mayRevoke: boolean;
}

/** Private links: the maker sees the page as it would be, and comments. */
export function PreviewLinks({ seriesId, previews, mayMake, mayRevoke }: PreviewLinksProps) {
  const create = useCreatePreview(seriesId);
  const [form, setForm] = useState(0);
  const made = create.data;
  const send = (event: SyntheticEvent<HTMLFormElement>): void => {
    event.preventDefault();
    const fields = new FormData(event.currentTarget);
    create.mutate(
      {
        for_whom: textOf(fields, "for_whom"),
        supplied_by: textOf(fields, "supplied_by"),
        days: Number(textOf(fields, "days")),
      },
      { onSuccess: () => setForm((count) => count + 1) },
    );
  };
  if (!mayMake && previews.length === 0) return null;
  return (
    <section aria-labelledby="previews" className="space-y-4">
      <h2 id="previews">Private preview for the maker</h2>
      {made !== undefined && (
        <ShownOnce
          title={`The link for ${made.for_whom}`}
          label="preview link"
          secret={made.link}
          onDone={() => create.reset()}
        >
          Send it yourself; it is shown now and never again. It is good until{" "}
          <Moment at={made.expires_at} as="day" />.
        </ShownOnce>
      )}
      {mayMake && made === undefined && (
        <form key={form} onSubmit={send} className="space-y-3">
          <Field label="for whom">
            {(props) => <TextInput {...props} name="for_whom" required maxLength={200} />}
          </Field>
          <Field label="who supplied the unit, as the preview says it">
            {(props) => (
              <TextInput {...props} name="supplied_by" required minLength={3} maxLength={200} />
            )}
          </Field>
          <Field label="good for, days">
            {(props) => (
              <TextInput
                {...props}
                name="days"
                type="number"
                figures
                min={1}
                max={90}
                defaultValue={14}
                className="max-w-28"
              />
            )}
          </Field>
          {create.isError && (
            <p role="alert" className="text-fault">
              {create.error.message}
            </p>
          )}
          <Button type="submit" size="form" busy={create.isPending}>
            Make a link
          </Button>
        </form>
      )}
      <ul>
        {previews.map((one) => (
          <PreviewRow key={one.id} seriesId={seriesId} preview={one} mayRevoke={mayRevoke} />
        ))}
      </ul>
    </section>
  );
}

function PreviewRow({
  seriesId,
  preview,
  mayRevoke,
}: {
  seriesId: string;
  preview: PreviewView;
  mayRevoke: boolean;
}) {
  const revoke = useRevokePreview(seriesId);
  const now = useNow();
  const over = now !== null && new Date(preview.expires_at) <= now;
  const open = preview.revoked_at === null && !over;
  return (
    <li className="flex flex-wrap items-center gap-3 border-t border-rule py-2.5">
      <p className="mr-auto">
        {preview.for_whom}
        <span className="block text-small text-ink-2">
          {preview.revoked_at !== null ? (
            <>
              revoked <Moment at={preview.revoked_at} />
            </>
          ) : (
            <>
              {over ? "expired" : "good until"} <Moment at={preview.expires_at} as="day" />
            </>
          )}
        </span>
      </p>
      {mayRevoke && open && (
        <Button
          size="small"
          busy={revoke.isPending}
          onClick={() => revoke.mutate(preview.id)}
          aria-label={`Revoke the link for ${preview.for_whom}`}
        >
          Revoke
        </Button>
      )}
      {revoke.isError && (
        <p role="alert" className="w-full text-fault">
          {revoke.error.message}
        </p>
      )}
    </li>
  );
}

const textOf = (form: FormData, name: string): string => {
  const value = form.get(name);
  return typeof value === "string" ? value.trim() : "";
};
