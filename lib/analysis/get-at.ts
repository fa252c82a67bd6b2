import { AnalysisError } from "../errors/app-error";

/** Element `index` of parallel lists that are as long as each other. @throws AnalysisError "analysis.argument" */
export function getAt<T>(list: readonly T[], index: number): T {
  const element = list[index];
  if (element === undefined) {
    throw new AnalysisError("analysis.argument", `no element ${index} among ${list.length}`);
  }
  return element;
}
