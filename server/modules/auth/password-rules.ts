import { NewPassword } from '#contract/auth.ts';
import { AppError } from '#server/lib/errors.ts';
import { isCommonPassword } from './common-passwords.ts';

const PRODUCT = 'selvage';
/** Shorter parts of a name are found in too many honest passwords. */
const SHORTEST_NAME_PART = 4;

/** Words of the person's name and address that a password must not hold. */
function namesOf(person: { name: string; email: string }): string[] {
  const [local = ''] = person.email.split('@');
  const words = `${person.name} ${local}`.toLowerCase().split(/[^\p{L}\p{N}]+/u);
  return [...words, local.toLowerCase()].filter((word) => word.length >= SHORTEST_NAME_PART);
}

/** Why a new password is refused, in words; null when it is fine. */
export function passwordFault(
  password: string,
  person: { name: string; email: string },
): string | null {
  const length = NewPassword.safeParse(password);
  if (!length.success)
    return `${length.error.issues[0]?.message ?? 'expected 12 to 72 bytes'}, found ${new TextEncoder().encode(password).length}`;
  const text = password.toLowerCase();
  if (text.includes(PRODUCT)) return 'expected a password without the name of the product';
  if (namesOf(person).some((name) => text.includes(name)))
    return 'expected a password without your own name or address';
  if (isCommonPassword(password))
    return 'expected a password that is not among those tried first (common words and runs)';
  return null;
}

/** @throws {AppError} 400 naming the field. */
export function requireGoodPassword(
  password: string,
  person: { name: string; email: string },
  field: string,
): void {
  const fault = passwordFault(password, person);
  if (fault === null) return;
  throw new AppError(400, 'weak-password', `The new password was refused: ${fault}.`, {
    fields: [{ path: field, message: fault }],
  });
}
