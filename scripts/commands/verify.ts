/** `npm run verify`: the checks that need no service, in seconds. */
import { runStages } from "../setup/stages";
import { verifyStages } from "../setup/verify-stages";

export async function main(): Promise<number> {
  const { passed, failed } = await runStages(verifyStages());
  console.log(`${passed} passed, ${failed} failed`);
  return failed === 0 && passed > 0 ? 0 : 1;
}
