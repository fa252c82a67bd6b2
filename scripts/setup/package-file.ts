import { join } from "node:path";
import { cloneDir } from "./bootstrap.mjs";

/** A program inside node_modules. */
export const packageFile = (path: string): string => join(cloneDir, "node_modules", path);
