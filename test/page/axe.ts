import AxeBuilder from 'axe-core';
import type { Page } from 'playwright-core';

/** What axe-core finds serious or critical within a part of the page, each with its place; all of it without one. */
export async function serious(page: Page, within?: string): Promise<string[]> {
  await page.evaluate(AxeBuilder.source);
  return page.evaluate(async (part) => {
    const { axe } = window as unknown as { axe: typeof import('axe-core') };
    const { violations } = await axe.run(part ?? document, { resultTypes: ['violations'] });
    return violations
      .filter(({ impact }) => impact === 'serious' || impact === 'critical')
      .map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.html.slice(0, 120)).join(' | ')}`);
  }, within);
}
