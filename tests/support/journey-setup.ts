import type { TestProject } from 'vitest/node';
import { startBuiltServer } from './journey-server.ts';

declare module 'vitest' {
  export interface ProvidedContext {
    /** Address of the built product that all journeys share. */
    journeyUrl: string;
  }
}

/** One server for all journeys; its stop must be clean. */
export default async function journeySetup(project: TestProject): Promise<() => Promise<void>> {
  const server = await startBuiltServer();
  project.provide('journeyUrl', server.url);
  return async () => {
    const code = await server.stop();
    if (code !== 0) throw new Error(`the server stopped with exit code ${code}, expected 0`);
  };
}
