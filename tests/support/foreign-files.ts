/** The same sound written by other programs in the layouts that recorders use, and in some that are not read. */
import type { ErrorCode } from "../../lib/errors/error-table";
import { runFfmpeg, runSox } from "./programs";

export interface ForeignFile {
  name: string;
  /** Writes the file from a 64-bit float WAV. */
  make: (from: string, to: string) => Promise<unknown>;
  /** What a reader finds; or the code with which it is refused. */
  expected:
    | {
        channels: number;
        bits: number;
        /** Largest deviation from the source, full scale 1. */ within: number;
      }
    | { code: ErrorCode };
}

const sox = (name: string, to: string[], expected: ForeignFile["expected"]): ForeignFile => ({
  name: `sox ${name}`,
  make: (from, out) => runSox(["-D", from, ...to, out]),
  expected,
});
const ffmpeg = (name: string, to: string[], expected: ForeignFile["expected"]): ForeignFile => ({
  name: `ffmpeg ${name}`,
  make: (from, out) => runFfmpeg(["-i", from, ...to, out]),
  expected,
});

/** Rounding to nearest costs half a step; some writers cut instead, which costs a whole one. */
const steps = (bits: number, count = 1): number => count * 2 ** (1 - bits) * 1.0001;
const FLOAT32 = 2 ** -24;
const pcm = (bits: number, channels = 1) => ({
  channels,
  bits,
  within: Math.max(steps(bits), FLOAT32),
});

export const FOREIGN_FILES: readonly ForeignFile[] = [
  sox("8-bit unsigned", ["-b", "8", "-e", "unsigned"], pcm(8)),
  sox("16-bit", ["-b", "16", "-e", "signed"], pcm(16)),
  sox("24-bit, extensible header", ["-b", "24", "-e", "signed"], pcm(24)),
  sox("24-bit, plain header", ["-b", "24", "-e", "signed", "-t", "wavpcm"], pcm(24)),
  sox("32-bit", ["-b", "32", "-e", "signed"], pcm(32)),
  sox("32-bit float", ["-b", "32", "-e", "floating-point"], {
    channels: 1,
    bits: 32,
    within: FLOAT32,
  }),
  sox("64-bit float", ["-b", "64", "-e", "floating-point"], {
    channels: 1,
    bits: 64,
    within: FLOAT32,
  }),
  sox("two channels", ["-b", "24", "-c", "2"], pcm(24, 2)),
  sox("with a comment", ["--add-comment", "third take, odd", "-b", "16"], pcm(16)),
  sox("AIFF", ["-t", "aiff"], { code: "audio.format-unsupported" }),
  sox("a-law", ["-e", "a-law"], { code: "audio.format-unsupported" }),
  sox("big-endian WAV", ["-B", "-b", "16", "-e", "signed", "-t", "wav"], {
    code: "audio.format-unsupported",
  }),
  ffmpeg("16-bit", ["-c:a", "pcm_s16le"], pcm(16)),
  ffmpeg("24-bit", ["-c:a", "pcm_s24le"], pcm(24)),
  ffmpeg("32-bit", ["-c:a", "pcm_s32le"], pcm(32)),
  ffmpeg("32-bit float", ["-c:a", "pcm_f32le"], { channels: 1, bits: 32, within: FLOAT32 }),
  ffmpeg("64-bit float", ["-c:a", "pcm_f64le"], { channels: 1, bits: 64, within: FLOAT32 }),
  ffmpeg("RF64", ["-c:a", "pcm_s24le", "-rf64", "always"], pcm(24)),
  ffmpeg(
    "broadcast chunk",
    ["-c:a", "pcm_s24le", "-write_bext", "1", "-metadata", "description=bench"],
    pcm(24),
  ),
  ffmpeg(
    "with metadata",
    ["-c:a", "pcm_s16le", "-metadata", "title=odd", "-metadata", "comment=abc"],
    pcm(16),
  ),
  ffmpeg("two channels", ["-c:a", "pcm_s24le", "-af", "pan=stereo|c0=c0|c1=0*c0"], pcm(24, 2)),
  ffmpeg(
    "four channels",
    ["-c:a", "pcm_s24le", "-af", "pan=4.0|c0=c0|c1=0*c0|c2=0*c0|c3=0*c0"],
    pcm(24, 4),
  ),
  ffmpeg("16-bit FLAC", ["-c:a", "flac", "-sample_fmt", "s16", "-f", "flac"], pcm(16)),
  ffmpeg("24-bit FLAC", ["-c:a", "flac", "-sample_fmt", "s32", "-f", "flac"], pcm(24)),
  sox("24-bit FLAC", ["-b", "24", "-t", "flac"], pcm(24)),
  ffmpeg("mu-law", ["-c:a", "pcm_mulaw"], { code: "audio.format-unsupported" }),
  ffmpeg("ADPCM", ["-c:a", "adpcm_ms"], { code: "audio.format-unsupported" }),
  ffmpeg("Wave64", ["-f", "w64"], { code: "audio.not-audio" }),
  ffmpeg("Ogg", ["-c:a", "flac", "-f", "ogg"], { code: "audio.format-unsupported" }),
  ffmpeg("CAF", ["-c:a", "pcm_s24le", "-f", "caf"], { code: "audio.format-unsupported" }),
  {
    name: "ffmpeg into a pipe, length left open",
    make: async (from, to) => {
      const { writeFile } = await import("node:fs/promises");
      await writeFile(
        to,
        await runFfmpeg(["-i", from, "-c:a", "pcm_s24le", "-f", "wav", "pipe:1"]),
      );
    },
    expected: { code: "audio.length-lies" },
  },
];
