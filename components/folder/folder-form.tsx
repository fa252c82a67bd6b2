"use client";

import { useQuery } from "@tanstack/react-query";
import { useState } from "react";
import { LOUDSPEAKER_KINDS } from "@/lib/api/loudspeakers";
import { formatBytes } from "@/lib/charts/format";
import { listSeriesFiles } from "@/lib/series/list-series-files";
import { Button } from "../parts/button";
import { Field, Select, TextInput } from "../parts/field";
import { loudspeakerListQuery } from "../queries/loudspeakers";
import type { ReadFolder, WantedSeries } from "./folder-queries";

interface FolderFormProps {
  read: ReadFolder;
  busy: boolean;
  onStart: (wanted: WantedSeries) => void;
}

const NEW = "new";

/** What was found, and whose loudspeaker it is. */
export function FolderForm({ read, busy, onStart }: FolderFormProps) {
  const { series, folder } = read;
  const list = useQuery(loudspeakerListQuery());
  const loudspeakers = list.data?.loudspeakers ?? [];
  const named = loudspeakers.find((one) => `${one.maker} ${one.model}` === series.loudspeaker);
  const [picked, setPicked] = useState<string | null>(null);
  const chosen = picked ?? named?.id ?? NEW;
  const known = loudspeakers.some((one) => one.id === chosen);
  const guess = splitName(series.loudspeaker);
  const names = listSeriesFiles(series);
  const bytes = names.reduce((sum, name) => sum + (folder.sizes.get(name) ?? 0), 0);
  return (
    <form
      aria-labelledby="found"
      className="space-y-4"
      onSubmit={(event) => {
        event.preventDefault();
        const form = new FormData(event.currentTarget);
        const text = (name: string): string => {
          const value = form.get(name);
          return typeof value === "string" ? value.trim() : "";
        };
        const loudspeaker = known
          ? { id: chosen }
          : { maker: text("maker"), model: text("model"), kind: text("kind") };
        onStart({ read, loudspeaker });
      }}
    >
      <h2 id="found">{series.loudspeaker}</h2>
      <p className="figures text-label text-ink-2">
        {names.length - 1} files, {formatBytes(bytes)}; {series.runs.length} runs
      </p>
      <Field label="loudspeaker">
        {(props) => (
          <Select {...props} value={chosen} onChange={(event) => setPicked(event.target.value)}>
            <option value={NEW}>a new one</option>
            {loudspeakers.map((one) => (
              <option key={one.id} value={one.id}>
                {one.model}, {one.maker}
                {one.serial === "" ? "" : `, ${one.serial}`}
              </option>
            ))}
          </Select>
        )}
      </Field>
      {!known && (
        <div className="grid gap-x-3.5 gap-y-3 sm:grid-cols-3">
          <Field label="maker">
            {(props) => (
              <TextInput
                {...props}
                name="maker"
                required
                maxLength={120}
                defaultValue={guess.maker}
              />
            )}
          </Field>
          <Field label="model">
            {(props) => (
              <TextInput
                {...props}
                name="model"
                required
                maxLength={120}
                defaultValue={guess.model}
              />
            )}
          </Field>
          <Field label="kind">
            {(props) => (
              <Select {...props} name="kind" defaultValue="other">
                {LOUDSPEAKER_KINDS.map((kind) => (
                  <option key={kind} value={kind}>
                    {kind}
                  </option>
                ))}
              </Select>
            )}
          </Field>
        </div>
      )}
      <Button type="submit" tone="main" size="form" busy={busy}>
        Create the series and send its recordings
      </Button>
    </form>
  );
}

/** "Withy Lane Osier 5A" leaves the cut to the person; one word is the model of an unnamed maker. */
export function splitName(name: string): { maker: string; model: string } {
  const words = name.trim().split(/\s+/);
  const cut = Math.ceil(words.length / 2);
  return words.length < 2
    ? { maker: "", model: words[0] ?? "" }
    : { maker: words.slice(0, cut).join(" "), model: words.slice(cut).join(" ") };
}
