export { default } from '#workers/tasks/drop-tables.ts';
