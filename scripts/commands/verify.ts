/** `npm run verify`: the checks that need no service, in seconds. */
import { runLanes, vitestStage } from "../setup/stages";
import { importStages, routeTypes, typedStages } from "../setup/verify-stages";

export async function main(): Promise<number> {
  const { passed, failed } = await runLanes(
    [routeTypes(), ...typedStages(), ...importStages()],
    [vitestStage("unit")],
  );
  console.log(`${passed} passed, ${failed} failed`);
  return failed === 0 && passed > 0 ? 0 : 1;
}
