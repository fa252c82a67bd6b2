import { AppError } from "../errors/app-error";

/** The largest JSON body that any operation takes, bytes. */
const MAX_JSON_BYTES = 1_000_000;

/**
 * The JSON body of a request.
 *
 * @throws AppError "request.media-type", "request.too-large", "request.invalid"
 */
export async function readJson(request: Request, maxBytes = MAX_JSON_BYTES): Promise<unknown> {
  const media = request.headers.get("content-type") ?? "";
  if (!/^application\/json\b/i.test(media)) {
    throw new AppError(
      "request.media-type",
      `The body must be application/json; this one is ${media === "" ? "without a type" : media}.`,
    );
  }
  const text = await readText(request, maxBytes);
  try {
    return JSON.parse(text) as unknown;
  } catch (error) {
    throw new AppError("request.invalid", "The body is not JSON.", { cause: error });
  }
}

async function readText(request: Request, maxBytes: number): Promise<string> {
  if (request.body === null) return "";
  const reader: ReadableStreamDefaultReader<Uint8Array> = request.body.getReader();
  const decoder = new TextDecoder();
  let text = "";
  let bytes = 0;
  for (;;) {
    const { done, value } = await reader.read();
    if (done) return text + decoder.decode();
    bytes += value.byteLength;
    if (bytes > maxBytes) {
      await reader.cancel();
      throw new AppError("request.too-large", `A request body has ${maxBytes} bytes at most.`);
    }
    text += decoder.decode(value, { stream: true });
  }
}
