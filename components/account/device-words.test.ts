import { expect, it } from "vitest";
import { toDeviceWords } from "./device-words";

const MOZILLA = "Mozilla/5.0";
const LIKE = "AppleWebKit/537.36 (KHTML, like Gecko)";

it.each([
  [`${MOZILLA} (X11; Linux x86_64; rv:140.0) Gecko/20100101 Firefox/140.0`, "Firefox on Linux"],
  [
    `${MOZILLA} (Windows NT 10.0; Win64; x64) ${LIKE} Chrome/140.0.0.0 Safari/537.36`,
    "Chrome on Windows",
  ],
  [
    `${MOZILLA} (Windows NT 10.0) ${LIKE} Chrome/140.0.0.0 Safari/537.36 Edg/140.0.0.0`,
    "Edge on Windows",
  ],
  [
    `${MOZILLA} (Macintosh; Intel Mac OS X 10_15_7) AppleWebKit/605.1.15 (KHTML, like Gecko) Version/18.0 Safari/605.1.15`,
    "Safari on Mac",
  ],
  [
    `${MOZILLA} (iPhone; CPU iPhone OS 18_0 like Mac OS X) AppleWebKit/605.1.15 (KHTML, like Gecko) Version/18.0 Mobile/15E148 Safari/604.1`,
    "Safari on iPhone",
  ],
  [
    `${MOZILLA} (Linux; Android 15) ${LIKE} Chrome/140.0.0.0 Mobile Safari/537.36`,
    "Chrome on Android",
  ],
  ["curl/8.5.0", "unknown device"],
  ["", "unknown device"],
])("%s", (userAgent, expected) => {
  expect(toDeviceWords(userAgent)).toBe(expected);
});
