import { AxeBuilder } from '@axe-core/playwright';
import { expect, type Page } from '@playwright/test';

/** Nothing serious or critical, in the theme in force. */
export async function expectAccessible(page: Page, where: string): Promise<void> {
  const { violations } = await new AxeBuilder({ page }).analyze();
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
