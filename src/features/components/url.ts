import { urlMaybeNumber, urlOneOf, urlText } from '#src/lib/url-state.ts';

export const COLOURS = ['group', 'lithology', 'weathering', 'campaign', 'none'] as const;
export type Colour = (typeof COLOURS)[number];

/** View of the components page: run, axes, tool, colours, the component in hand and where its scores are drawn. */
export const COMPONENTS_VIEW = {
  run: urlMaybeNumber(),
  /** Suite offered for the next run. */
  suite: urlMaybeNumber(),
  x: urlText('PC1'),
  y: urlText('PC2'),
  tool: urlOneOf(['lasso', 'box', 'pan', 'rule'], 'lasso'),
  colour: urlOneOf(COLOURS, 'group'),
  pc: urlText('PC1'),
  place: urlOneOf(['section', 'plan'], 'section'),
  section: urlMaybeNumber(),
};
