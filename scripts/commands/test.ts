/** `npm test`: set-up for the tests, then everything there is to check. */
import { runLanes, type Stage, vitestStage } from "../setup/stages";
import { ensureSystemPackages, POSTGRESQL, program } from "../setup/system-packages";
import { importStages, routeTypes, typedStages } from "../setup/verify-stages";
import { ensureBuild } from "../setup/web-build";

const build: Stage = {
  name: "build",
  run: async (_, signal) => {
    await ensureBuild(signal);
    return { passed: 0, failed: 0 };
  },
};

/** A browser and a server wait for each other most of the time; what only computes takes what they leave. */
const IN_THE_BACKGROUND = 15;

export async function main(): Promise<number> {
  await ensureSystemPackages([POSTGRESQL, program("chromium"), program("sox"), program("ffmpeg")]);
  const { passed, failed } = await runLanes(
    // The build writes the types of the routes anew, so that nobody may read them meanwhile.
    [routeTypes(), ...typedStages(), build, vitestStage("rooms"), vitestStage("browser")],
    [
      ...importStages(),
      vitestStage("unit", IN_THE_BACKGROUND),
      vitestStage("checks", IN_THE_BACKGROUND),
    ],
  );
  console.log(`${passed} passed, ${failed} failed`);
  return failed === 0 && passed > 0 ? 0 : 1;
}
