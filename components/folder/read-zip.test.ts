import { BlobReader, BlobWriter, TextReader, ZipWriter } from "@zip.js/zip.js";
import { describe, expect, it } from "vitest";
import { AppError } from "@/lib/errors/app-error";
import { readFolder } from "./read-folder";
import { readZip } from "./read-zip";

type Contents = Readonly<Record<string, Uint8Array<ArrayBuffer> | string>>;

async function pack(contents: Contents, options: object = {}): Promise<Uint8Array<ArrayBuffer>> {
  const writer = new ZipWriter(new BlobWriter("application/zip"), { useWebWorkers: false });
  for (const [name, content] of Object.entries(contents)) {
    const reader =
      typeof content === "string" ? new TextReader(content) : new BlobReader(new Blob([content]));
    await writer.add(name, reader, { dataDescriptor: false, ...options });
  }
  return new Uint8Array(await (await writer.close()).arrayBuffer());
}

const codeOf = (reading: Promise<unknown>): Promise<string> =>
  reading.then(
    () => "taken",
    (error: unknown) => (error instanceof AppError ? error.code : String(error)),
  );

const noise = Uint8Array.from({ length: 5000 }, (_, at) => (at * 7919) % 251);

describe("readZip", () => {
  it.each([
    ["stored", { level: 0 }],
    ["deflated", { level: 6 }],
    ["with sizes behind the data", { level: 6, dataDescriptor: true }],
  ])("reads %s entries below their folder", async (_how, options) => {
    const bytes = await pack({ "a/series.json": "{}", "a/r/76.wav": noise }, options);
    const folder = await readZip(new Blob([bytes]));
    expect([...folder.sizes]).toEqual([
      ["series.json", 2],
      ["r/76.wav", 5000],
    ]);
    expect(await (await folder.open("series.json")).text()).toBe("{}");
    expect(new Uint8Array(await (await folder.open("r/76.wav")).arrayBuffer())).toEqual(noise);
    expect(await codeOf(folder.open("86.wav"))).toBe("series.file-missing");
  });

  it("stops at the size that was announced", async () => {
    const bytes = await pack({ "series.json": "{}", "bomb.wav": new Uint8Array(1_000_000) });
    const view = new DataView(bytes.buffer);
    // Both headers say 1000 bytes: as a bomb would.
    for (let at = 0; at + 4 <= bytes.length; at += 1) {
      if (view.getUint32(at, true) === 1_000_000) view.setUint32(at, 1000, true);
    }
    const folder = await readZip(new Blob([bytes]));
    expect(folder.sizes.get("bomb.wav")).toBe(1000);
    expect(await codeOf(folder.open("bomb.wav"))).toBe("request.invalid");
  });

  it.each([
    ["what is no archive", () => Promise.resolve(new Uint8Array(noise))],
    [
      "a truncated one",
      async () => (await pack({ "series.json": "{}", "76.wav": noise })).slice(0, -40),
    ],
    ["a locked one", () => pack({ "series.json": "{}" }, { password: "x" })],
    [
      "a damaged one",
      async () => {
        const bytes = await pack({ "series.json": "twelve bytes" }, { level: 0 });
        const at = bytes.indexOf("t".charCodeAt(0), 30);
        bytes[at + 13] = 88;
        return bytes;
      },
    ],
  ])("refuses %s", async (_what, make) => {
    const bytes = await make();
    const reading = readZip(new Blob([bytes])).then((folder) => folder.open("series.json"));
    expect(await codeOf(reading)).toBe("request.invalid");
  });

  it("refuses names that lead out", async () => {
    const bytes = await pack({ "series.json": "{}", "a/../../b.wav": noise });
    expect(await codeOf(readZip(new Blob([bytes])))).toMatch(
      /^(?:request\.invalid|series\.file-name)$/,
    );
  });
});

describe("readFolder", () => {
  it("takes a folder as it is, and unpacks an archive alone", async () => {
    const dropped = [
      { path: "s/series.json", file: new File(["{}"], "series.json") },
      { path: "s/76.wav", file: new File([noise], "76.wav") },
    ];
    const folder = await readFolder(dropped);
    expect([...folder.sizes.keys()]).toEqual(["series.json", "76.wav"]);
    expect((await folder.open("76.wav")).size).toBe(5000);
    const file = new File([await pack({ "series.json": "{}" })], "s.ZIP");
    expect([...(await readFolder([{ path: "s.ZIP", file }])).sizes.keys()]).toEqual([
      "series.json",
    ]);
  });
});
