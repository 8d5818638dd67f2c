export { addDistances } from './distances';
export { centreRows, lnLess } from './logarithm';
export { addGroupMoments, mixtureShares } from './mixture';
export { addColumnSums, addCrossProducts, project } from './products';
export { assign, exchange, nearestTwo, sumGroups } from './rows';
export { sort } from './sorting';
