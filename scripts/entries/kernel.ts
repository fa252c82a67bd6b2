/** `npx tsx scripts/entries/kernel.ts` writes lib/analysis/kernel/kernel-bytes.ts anew after a change of kernel.as. */
import { checkKernel } from "../setup/kernel";

checkKernel(true);
