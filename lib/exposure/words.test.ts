import { describe, expect, it } from "vitest";
import { toDoseText, toLevelText, toTimeText, toWholeDoseText } from "./words";

const plain = (text: string) => text.replaceAll("\u00a0", " ");

describe("exposure in words", () => {
  it.each([
    [40 * 3600, "40 h"],
    [11_403, "3 h 10 min"],
    [7200, "2 h"],
    [899.99, "14 min"],
    [59.9, "59 s"],
    [24 * 3600 + 3599, "24 h"],
  ])("time of %d s rounds down to %s", (timeS, text) => {
    expect(plain(toTimeText(timeS))).toBe(text);
  });

  it("prints seconds where asked", () => {
    expect(plain(toTimeText(450, { seconds: true }))).toBe("7 min 30 s");
    expect(plain(toTimeText(480, { seconds: true }))).toBe("8 min");
  });

  it("rounds levels up, and limits down where asked", () => {
    expect(plain(toLevelText(101.01, "dB(A)"))).toBe("102 dB(A)");
    expect(plain(toLevelText(102 + 1e-12, "dB(A)"))).toBe("102 dB(A)");
    expect(plain(toLevelText(101.9, "dB", "down"))).toBe("101 dB");
    expect(plain(toLevelText(-3.2, "dB"))).toBe("\u22123 dB");
  });

  it("rounds doses up", () => {
    expect(plain(toDoseText(0.05316))).toBe("5.32 %");
    expect(plain(toDoseText(0.00004))).toBe("under 0.01 %");
    expect(plain(toDoseText(0))).toBe("0.00 %");
    expect(plain(toWholeDoseText(0.2001))).toBe("21 %");
  });
});
