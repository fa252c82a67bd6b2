import { describe, expect, it } from "vitest";
import { ensureSystemPackages, type Machine } from "./system-packages";

/** A Debian where installing works; `installed` grows as it is asked. */
function machineWith(change: Partial<Machine>): { machine: Machine; commands: string[] } {
  const commands: string[] = [];
  const machine: Machine = {
    isRoot: true,
    hasTerminal: false,
    has: () => true,
    run: (command) => {
      commands.push(command.join(" "));
      return Promise.resolve();
    },
    ...change,
  };
  return { machine, commands };
}

const APT = "env DEBIAN_FRONTEND=noninteractive apt-get --quiet";
const INSTALL = `${APT} install --yes --no-install-recommends some-tool`;

/** Missing at the first look, there after the first install. */
function appearing(commands: readonly string[]) {
  return { debian: "some-tool", present: () => commands.some((text) => text.includes("install")) };
}

describe("ensureSystemPackages", () => {
  it("asks for nothing where everything is there", async () => {
    const { machine, commands } = machineWith({});
    await ensureSystemPackages([{ debian: "some-tool", present: () => true }], machine);
    expect(commands).toEqual([]);
  });

  it.each([
    ["root", { isRoot: true }, [`${APT} update`, INSTALL]],
    [
      "sudo at a terminal",
      { isRoot: false, hasTerminal: true },
      [`sudo ${APT} update`, `sudo ${INSTALL}`],
    ],
    [
      "sudo that asks for nothing",
      { isRoot: false },
      ["sudo -n true", `sudo -n ${APT} update`, `sudo -n ${INSTALL}`],
    ],
  ])("installs as %s", async (_, change, expected) => {
    const { machine, commands } = machineWith(change);
    await ensureSystemPackages([appearing(commands)], machine);
    expect(commands).toEqual(expected);
  });

  it.each([
    [
      "no root and no sudo",
      { isRoot: false, has: (name: string) => name !== "sudo" },
      'run "apt-get install --no-install-recommends some-tool" as root once',
    ],
    [
      "sudo that wants a password nobody can type",
      { isRoot: false, run: () => Promise.reject(new Error("a password is required")) },
      "Installing needs root",
    ],
    ["no Debian", { has: (name: string) => name !== "apt-get" }, "has no apt-get"],
    [
      "a failing install",
      { run: () => Promise.reject(new Error("E: no space left")) },
      "E: no space left",
    ],
  ])("says the remedy in one sentence: %s", async (_, change, words) => {
    const { machine, commands } = machineWith(change);
    const attempt = ensureSystemPackages([appearing(commands)], machine);
    await expect(attempt).rejects.toMatchObject({ name: "SetUpError" });
    await expect(attempt).rejects.toThrow(words);
  });
});
