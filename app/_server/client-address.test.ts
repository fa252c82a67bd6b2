import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import { afterEach, beforeEach, expect, it } from "vitest";
import { armClientAddress, findIp } from "./client-address";

let server: Server;
let url = "";
beforeEach(async () => {
  server = createServer((request, response) => {
    response.end(
      findIp(new Headers({ "x-forwarded-for": String(request.headers["x-forwarded-for"] ?? "") })),
    );
  });
  await new Promise<void>((done) => server.listen(0, "127.0.0.1", done));
  url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
});
afterEach(() => server.close());

const ask = async (headers: Record<string, string>): Promise<string> =>
  (await fetch(url, { headers })).text();
const CHOSEN = { "x-forwarded-for": "203.0.113.9, 198.51.100.4" };

it("is what the server in front says, where one is", async () => {
  armClientAddress(true);
  expect(await ask(CHOSEN)).toBe("198.51.100.4");
  expect(await ask({})).toBe("unknown");
});

it("is that of the connection elsewhere, whatever the sender chose", async () => {
  armClientAddress(false);
  expect(await ask(CHOSEN)).toBe("127.0.0.1");
  expect(await ask({})).toBe("127.0.0.1");
});
