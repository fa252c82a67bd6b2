/** `npx tsx scripts/entries/reader-script.ts` writes public/reader.js anew after a change of its sources. */
import { checkReaderScript } from "../setup/reader-script";

await checkReaderScript(true);
