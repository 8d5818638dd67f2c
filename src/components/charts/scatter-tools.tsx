import { Segmented } from '#src/components/ui/segmented.tsx';

export type ScatterTool = 'lasso' | 'box' | 'pan' | 'rule';

const TOOLS: readonly { value: ScatterTool; label: string }[] = [
  { value: 'lasso', label: 'Lasso' },
  { value: 'box', label: 'Box' },
  { value: 'pan', label: 'Pan' },
  { value: 'rule', label: 'Rule' },
];

/**
 * What the pointer does in a plot, for the head of its plate. Lasso and box take points (Shift adds,
 * Alt takes away), pan moves and zooms, rule takes points by typed limits and needs no drag.
 */
export function ScatterTools({ tool, onTool }: { tool: ScatterTool; onTool: (tool: ScatterTool) => void }) {
  return <Segmented label="Tool" segments={TOOLS} value={tool} onPick={onTool} />;
}
