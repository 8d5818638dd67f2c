import { AppError } from './errors.ts';

/** Strong entity tag of a version. */
export const etagOf = (version: number): string => `"${version}"`;

/**
 * The version named by `If-Match`.
 *
 * @throws {AppError} 428 when absent; 400 when it is not one version in quotes.
 */
export function readIfMatch(header: string | undefined): number {
  if (header === undefined) {
    throw new AppError(
      428,
      'version-needed',
      'Expected the header If-Match with the version you last read, for example "3"; found none.',
    );
  }
  const match = /^"(\d{1,15})"$/.exec(header.trim());
  if (!match)
    throw new AppError(
      400,
      'bad-version',
      'Expected If-Match to be one version in quotes, for example "3".',
    );
  return Number(match[1]);
}
