/** Chromium for the suites that look at pages. */
import axe from "axe-core";
import { type Browser, chromium, type Page } from "playwright-core";
import { z } from "zod";

/** Where the distribution puts it. */
const CHROMIUM = "/usr/bin/chromium";

export const openBrowser = (): Promise<Browser> => chromium.launch({ executablePath: CHROMIUM });

/** Forms that came with the page are taken over by its script; before that they would be sent as plain ones. */
export async function waitForForm(page: Page): Promise<void> {
  await page.waitForFunction(
    "Object.keys(document.querySelector('form') ?? {}).some((key) => key.startsWith('__reactProps'))",
  );
}

const findingsSchema = z.array(z.string());

/**
 * What a page as it stands now lacks for readers, keyboards and weak eyes; empty is good. The
 * page's context must have been opened with `bypassCSP`, so that the checker may be put in.
 */
export async function findAccessFaults(page: Page): Promise<string[]> {
  await page.evaluate(axe.source);
  const findings: unknown = await page.evaluate(`
    axe.run(document, { resultTypes: ["violations"] }).then(({ violations }) =>
      violations.flatMap(({ id, nodes }) => nodes.map(({ html }) => id + ": " + html.slice(0, 160))))
  `);
  return findingsSchema.parse(findings);
}
