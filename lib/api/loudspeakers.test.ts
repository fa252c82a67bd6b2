import { describe, expect, it } from "vitest";
import { loudspeakerChangeSchema } from "./loudspeakers";

describe("loudspeakerChangeSchema", () => {
  it("leaves alone what is not named", () => {
    expect(loudspeakerChangeSchema.parse({ model: "Osier 5A" })).toEqual({ model: "Osier 5A" });
  });

  it("takes null and an empty serial number as a change", () => {
    expect(loudspeakerChangeSchema.parse({ serial: "", tuning_Hz: null })).toEqual({
      serial: "",
      tuning_Hz: null,
    });
  });

  it("refuses an unknown key", () => {
    expect(loudspeakerChangeSchema.safeParse({ colour: "black" }).success).toBe(false);
  });
});
