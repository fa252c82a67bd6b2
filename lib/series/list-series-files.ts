import type { Series } from "./series-schema";

/** Every file of the folder that the analysis of a series reads, series.json itself included. */
export function listSeriesFiles(series: Series): string[] {
  const { stimulus, calibration, microphone, ambient, runs } = series;
  const tones =
    calibration !== undefined && "file" in calibration
      ? [calibration.file, calibration.after_file]
      : [];
  const named = [
    stimulus.file,
    ...tones,
    microphone?.file,
    ambient?.file,
    ...runs.map(({ file }) => file),
  ];
  return ["series.json", ...named.filter((file) => file !== undefined)];
}
