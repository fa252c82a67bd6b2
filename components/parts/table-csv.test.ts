import { createElement } from "react";
import { describe, expect, it } from "vitest";
import { toTableCsv } from "./table-csv";

describe("toTableCsv", () => {
  it("gives what the table shows, in plain signs, under its comments", () => {
    const csv = toTableCsv(
      [
        { key: "band", head: "band" },
        { key: "loss", head: "compression, dB" },
      ],
      [
        { id: 63, cells: { band: "63\u00a0Hz", loss: "\u22120.1" } },
        { id: 80, cells: { band: "80\u00a0Hz", loss: createElement("span") } },
        { id: 100, cells: { band: "100\u00a0Hz", loss: 2.5 } },
      ],
      ["Levels at 1\u00a0m."],
    );
    expect(csv).toBe(
      '# Levels at 1 m.\r\nband,"compression, dB"\r\n63 Hz,-0.1\r\n80 Hz,\r\n100 Hz,2.5\r\n',
    );
  });
});
