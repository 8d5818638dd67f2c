export { default } from '#workers/tasks/hash-password.ts';
