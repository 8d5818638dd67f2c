/** Called with the share done, 0 to 1, some hundreds of times at most; it may throw to cancel. */
export type OnProgress = (share: number) => void;
