/** `npx tsx scripts/entries/fft-kernel.ts` writes lib/analysis/fft/kernel-bytes.ts anew after a change of kernel.as. */
import { checkFftKernel } from "../setup/fft-kernel";

checkFftKernel(true);
