import { urlMaybeNumber, urlNumbers, urlOneOf, urlText } from '#src/lib/url-state.ts';

/** View of the groups page: the grouping in hand, axes, tool, place, number of groups to run next, groups ticked. */
export const GROUPS_VIEW = {
  grouping: urlMaybeNumber(),
  x: urlText('PC1'),
  y: urlText('PC2'),
  tool: urlOneOf(['lasso', 'box', 'pan', 'rule'], 'lasso'),
  place: urlOneOf(['section', 'plan'], 'section'),
  section: urlMaybeNumber(),
  k: urlMaybeNumber(),
  groups: urlNumbers(),
};
