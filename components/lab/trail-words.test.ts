import { describe, expect, it } from "vitest";
import { toTrailWords } from "./trail-words";

describe("toTrailWords", () => {
  it.each([
    ["account.signed-in", {}, "signed in"],
    ["account.password-changed", { endedSessions: 0 }, "changed the password"],
    [
      "account.password-changed",
      { endedSessions: 1 },
      "changed the password; one other session ended",
    ],
    [
      "invitation.created",
      { email: "bo@fen.example", roles: ["tester", "analyst"] },
      "invited bo@fen.example as tester, analyst",
    ],
    [
      "member.roles-changed",
      { name: "Bo Fen", from: ["tester"], to: ["tester", "admin"] },
      "changed the roles of Bo Fen from tester to tester, admin",
    ],
    ["member.removed", { name: "Bo Fen", roles: ["tester"] }, "removed Bo Fen, who was tester"],
    ["token.revoked", { name: "bench", owner: "Bo Fen" }, "revoked the token bench of Bo Fen"],
    [
      "lab.changed",
      { time_zone: "UTC", settings: { two_person_rule: false } },
      "changed its time zone to UTC, its settings",
    ],
    ["run.uploaded", { file: "a_96.wav", label: "96 dB" }, "uploaded a_96.wav for 96 dB"],
    ["review.taken-up", {}, "review taken up"],
  ])("%s %o", (act, details, expected) => {
    expect(toTrailWords({ act, details }).words).toBe(expected);
  });

  it("keeps the reason of an act on a series", () => {
    const details = { file: "a.wav", reason: "door slammed" };
    expect(toTrailWords({ act: "run.excluded", details }).reason).toBe("door slammed");
  });

  it("says an act whose details are strange", () => {
    expect(toTrailWords({ act: "member.removed", details: { roles: "all" } }).words).toBe(
      "removed a member, who was no role",
    );
  });
});
