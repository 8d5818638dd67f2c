export const SCATTER_TOOLS = ['lasso', 'box', 'pan', 'rule'] as const;
export type ScatterTool = (typeof SCATTER_TOOLS)[number];

const WORDS: Record<ScatterTool, string> = { lasso: 'Lasso', box: 'Box', pan: 'Pan', rule: 'Rule' };

const HINTS: Record<ScatterTool, string> = {
  lasso: 'Draw round points to take them. Shift adds, Alt takes away.',
  box: 'Drag a box over points to take them. Shift adds, Alt takes away.',
  pan: 'Drag to move, wheel to zoom, 0 fits.',
  rule: 'Take points by typed limits; needs no drag.',
};

/** What the pointer does in a plot, as a segmented control for the head of its plate. */
export function ScatterTools({ tool, onTool }: { tool: ScatterTool; onTool: (tool: ScatterTool) => void }) {
  return (
    <div role="group" aria-label="Tool" className="inline-flex overflow-hidden rounded border" style={{ borderColor: 'var(--rule-firm)' }}>
      {SCATTER_TOOLS.map((name) => {
        const chosen = name === tool;
        return (
          <button
            key={name}
            type="button"
            aria-pressed={chosen}
            title={HINTS[name]}
            onClick={() => onTool(name)}
            className="h-6 cursor-pointer border-r px-2 last:border-r-0"
            style={{
              font: '500 0.8125rem/1 var(--font-ui)',
              borderColor: 'var(--rule)',
              background: chosen ? 'var(--ink)' : 'none',
              color: chosen ? 'var(--paper)' : 'var(--ink-2)',
            }}
          >
            {WORDS[name]}
          </button>
        );
      })}
    </div>
  );
}
