/** Where the sign-in page sends a person afterwards: a path of ours, never another site. */
export const safeReturn = (to: string | null): string =>
  to !== null && /^\/(?![/\\])/.test(to) ? to : '/deposits';

export const signInAddress = (pathAndQuery: string): string =>
  pathAndQuery === '/' || pathAndQuery === '/deposits'
    ? '/sign-in'
    : `/sign-in?to=${encodeURIComponent(pathAndQuery)}`;
