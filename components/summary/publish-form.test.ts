import { describe, expect, it } from "vitest";
import { readPublishForm } from "./publish-form";

const read = (fields: Record<string, string>) => {
  const form = new FormData();
  for (const [name, value] of Object.entries({ supplied_by: "bought by the lab", ...fields })) {
    form.set(name, value);
  }
  return readPublishForm(form);
};

describe("readPublishForm", () => {
  it("sends what is filled in, and null for what is not", () => {
    expect(read({ words: " Quiet. ", maker_name: "", maker_words: "" })).toEqual({
      words: "Quiet.",
      supplied_by: "bought by the lab",
      maker_statement: null,
      answer_to_maker: null,
      embargo_until: null,
      change_note: null,
      evidence_public: false,
    });
    expect(read({ evidence: "on" })).toMatchObject({ evidence_public: true });
  });

  it("prints an answer only beside a statement", () => {
    expect(read({ answer: "We did." })).toMatchObject({ answer_to_maker: null });
    expect(read({ maker_name: "Ida", maker_words: "Try 63 Hz.", answer: "We did." })).toMatchObject(
      {
        maker_statement: { name: "Ida", words: "Try 63 Hz." },
        answer_to_maker: "We did.",
      },
    );
  });

  it.each([
    [{ maker_name: "Ida" }, "needs a name and words"],
    [{ slug: "Osier 8A" }, "osier-8a"],
  ])("%o", (fields, fault) => {
    expect(read(fields)).toContain(fault);
  });
});
