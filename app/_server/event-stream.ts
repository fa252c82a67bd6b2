/** Server-sent events: a stream that ends with the client, with the server, and with the right to see. */
import { getShutdownSignal } from "../../lib/config/shutdown";

const HEARTBEAT_MS = 15_000;
const RIGHTS_EVERY_MS = 10_000;
/** What a client waits before it connects again. */
const RETRY_MS = 2000;

export interface EventSink {
  send: (event: string, data: unknown) => void;
  end: () => void;
}

export interface StreamOptions {
  request: Request;
  /** Begins to send; what it returns is called at the end. */
  start: (sink: EventSink) => () => void;
  /** Whether the caller may still see this; asked again every few seconds. */
  mayStill: () => Promise<boolean>;
}

export function answerEvents({ request, start, mayStill }: StreamOptions): Response {
  const encoder = new TextEncoder();
  let ended = false;
  let stop: () => void = () => undefined;
  const body = new ReadableStream<Uint8Array>({
    start(controller) {
      const write = (text: string): void => {
        if (!ended) controller.enqueue(encoder.encode(text));
      };
      const end = (): void => {
        if (ended) return;
        ended = true;
        stop();
        controller.close();
      };
      const sink: EventSink = {
        send: (event, data) => write(`event: ${event}\ndata: ${JSON.stringify(data)}\n\n`),
        end,
      };
      const heartbeat = setInterval(() => write(": still here\n\n"), HEARTBEAT_MS);
      const rights = setInterval(() => {
        mayStill().then(
          (may) => {
            if (!may) end();
          },
          // Cannot be told: the next look decides, and the stream carries nothing by itself.
          () => undefined,
        );
      }, RIGHTS_EVERY_MS);
      const shutdown = getShutdownSignal();
      request.signal.addEventListener("abort", end, { once: true });
      shutdown.addEventListener("abort", end, { once: true });
      write(`retry: ${RETRY_MS}\n\n`);
      const stopSource = start(sink);
      stop = () => {
        clearInterval(heartbeat);
        clearInterval(rights);
        request.signal.removeEventListener("abort", end);
        shutdown.removeEventListener("abort", end);
        stopSource();
      };
      // What was over before it began.
      if (ended) stop();
      else if (request.signal.aborted || shutdown.aborted) end();
    },
    cancel() {
      // Word that is still on its way finds no reader.
      ended = true;
      stop();
    },
  });
  return new Response(body, {
    headers: {
      "content-type": "text/event-stream",
      "cache-control": "no-store, no-transform",
      "x-accel-buffering": "no",
    },
  });
}
