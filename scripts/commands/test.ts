/** `npm test`: set-up for the tests, then everything there is to check. */
import { runStages, type Stage, vitestStage } from "../setup/stages";
import { ensureSystemPackages, POSTGRESQL, program } from "../setup/system-packages";
import { verifyStages } from "../setup/verify-stages";
import { ensureBuild } from "../setup/web-build";

const build: Stage = {
  name: "build",
  run: async (_, signal) => {
    await ensureBuild(signal);
    return { passed: 0, failed: 0 };
  },
};

export async function main(): Promise<number> {
  await ensureSystemPackages([POSTGRESQL, program("chromium"), program("sox"), program("ffmpeg")]);
  const { passed, failed } = await runStages([
    ...verifyStages(),
    build,
    vitestStage("checks"),
    vitestStage("rooms"),
    vitestStage("browser"),
  ]);
  console.log(`${passed} passed, ${failed} failed`);
  return failed === 0 && passed > 0 ? 0 : 1;
}
