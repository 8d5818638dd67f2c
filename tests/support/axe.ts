import axe from 'axe-core';

/**
 * Violations of WCAG 2.2 A and AA that can be seen without layout, as readable lines. Colour contrast
 * needs a real browser and is judged there.
 */
export async function axeViolations(container: Element): Promise<string[]> {
  const { violations } = await axe.run(container, {
    runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'],
    rules: { 'color-contrast': { enabled: false } },
  });
  return violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' | ')}`);
}
