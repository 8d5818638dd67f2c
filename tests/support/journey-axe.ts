import axe from 'axe-core';
import type { Page } from 'playwright-core';
import * as z from 'zod';

const RULES = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'];
const Violations = z.array(
  z.object({ id: z.string(), nodes: z.array(z.object({ html: z.string(), failureSummary: z.string().optional() })) }),
);

/** Violations of WCAG 2.2 A and AA on the page as it is laid out and coloured, as readable lines. */
export async function pageViolations(page: Page): Promise<string[]> {
  // The content policy forbids a script tag; the debugger may still evaluate.
  await page.evaluate(axe.source);
  const found = await page.evaluate(
    `axe.run(document, { runOnly: ${JSON.stringify(RULES)} }).then(({ violations }) => violations)`,
  );
  return Violations.parse(found).flatMap(({ id, nodes }) =>
    nodes.map(({ html, failureSummary = '' }) => `${id}: ${html.slice(0, 300)} (${failureSummary.replaceAll(/\s+/g, ' ')})`),
  );
}
