import fs from 'node:fs';
import { createRequire } from 'node:module';
import type { Page } from 'playwright-core';
import { z } from 'zod';

const axeSource = fs.readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

const violationsSchema = z.array(
  z.object({
    id: z.string(),
    impact: z.string().nullish(),
    help: z.string(),
    nodes: z.array(z.object({ html: z.string() })),
  }),
);

/** Rules of WCAG 2.2 A and AA and axe's best practices. */
const TAGS = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];

/** What axe finds wrong with the page as it stands, one line each; empty when nothing. */
export async function accessibilityProblems(page: Page): Promise<string[]> {
  // evaluate runs through the debugger, which the page's content security policy does not bind.
  await page.evaluate(axeSource);
  const found: unknown = await page.evaluate(
    `axe.run(document, { runOnly: ${JSON.stringify(TAGS)}, resultTypes: ['violations'] }).then((r) => r.violations)`,
  );
  return violationsSchema
    .parse(found)
    .map(
      ({ id, impact, help, nodes }) => `${id} (${impact ?? 'unrated'}): ${help}: ${nodes.map((n) => n.html).join(' ')}`,
    );
}
