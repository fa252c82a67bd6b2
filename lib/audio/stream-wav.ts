/** A 24-bit WAV of one channel, written piece by piece: for files that are too long to hold. */
import { AppError } from "../errors/app-error";
import { writeWav } from "./write-wav";

const HEADER_BYTES = 44;
const WIDTH = 3;

/** Bytes of the whole file. */
export const toPcm24Bytes = (frames: number): number =>
  HEADER_BYTES + frames * WIDTH + ((frames * WIDTH) % 2);

/**
 * The same bytes as writeWav of all pieces together.
 *
 * @param frames samples in all; the pieces must hold exactly as many.
 * @throws AppError "analysis.argument" where they do not, or where the file would pass 4 GiB.
 */
export function* streamPcm24(
  pieces: Iterable<Float64Array>,
  frames: number,
  rateHz: number,
): Generator<Uint8Array<ArrayBuffer>> {
  if (toPcm24Bytes(frames) > 0xffffffff) {
    throw new AppError("analysis.argument", `A WAV file cannot hold ${frames} samples.`);
  }
  yield toHeader(frames, rateHz);
  let sent = 0;
  for (const piece of pieces) {
    sent += piece.length;
    if (sent > frames) break;
    // Whole frames without a header of their own: three bytes each, no padding inside the file.
    yield writeWav([piece], rateHz, "pcm24").subarray(
      HEADER_BYTES,
      HEADER_BYTES + piece.length * WIDTH,
    );
  }
  if (sent !== frames) {
    throw new AppError("analysis.argument", `${frames} samples were announced, ${sent} came.`);
  }
  if ((frames * WIDTH) % 2 === 1) yield new Uint8Array(1);
}

function toHeader(frames: number, rateHz: number): Uint8Array<ArrayBuffer> {
  const header = writeWav([new Float64Array(0)], rateHz, "pcm24").slice(0, HEADER_BYTES);
  const view = new DataView(header.buffer);
  view.setUint32(4, toPcm24Bytes(frames) - 8, true);
  view.setUint32(40, frames * WIDTH, true);
  return header;
}
