import { AxeBuilder } from '@axe-core/playwright';
import { expect, type Page } from '@playwright/test';

/** Nothing serious or critical, in the theme in force; by all rules unless some are named. */
export async function expectAccessible(page: Page, where: string, rules?: string[]): Promise<void> {
  const axe = new AxeBuilder({ page });
  const { violations } = await (rules ? axe.withRules(rules) : axe).analyze();
  const grave = violations
    .filter(({ impact }) => impact === 'serious' || impact === 'critical')
    .map(
      ({ id, nodes }) =>
        `${id}: ${nodes
          .map((node) => `${node.target.join(' ')} ${node.any[0]?.message ?? ''}`)
          .slice(0, 4)
          .join(' | ')}`,
    );
  expect.soft(grave, where).toEqual([]);
}
