import type { Role } from '#contract/roles.ts';
import type { Message } from './mailer.ts';

/** Names come from people: in a message they are one line and cannot pretend to be more of it. */
const plain = (text: string): string =>
  text
    .replaceAll(/\p{Cc}+/gu, ' ')
    .trim()
    .slice(0, 120);

export function invitationMessage(given: {
  to: string;
  link: string;
  invitedBy: string;
  deposit: { name: string; role: Role } | null;
}): Message {
  const what = given.deposit
    ? `the deposit ${plain(given.deposit.name)} as ${given.deposit.role.replace('-', ' ')}`
    : 'Selvage';
  return {
    to: given.to,
    subject: `${plain(given.invitedBy)} invites you to ${given.deposit ? plain(given.deposit.name) : 'Selvage'}`,
    text: [
      `${plain(given.invitedBy)} invites you to ${what}.`,
      '',
      'Open this link to accept. It works once and for 7 days:',
      given.link,
      '',
      'If you did not expect this, ignore it: nothing happens until the link is opened and accepted.',
    ].join('\n'),
  };
}

export const resetMessage = (given: { to: string; link: string }): Message => ({
  to: given.to,
  subject: 'Set a new password for Selvage',
  text: [
    'Somebody, we hope you, asked to set a new password for this address.',
    '',
    'Open this link to set it. It works once and for 1 hour:',
    given.link,
    '',
    'If it was not you, ignore this message: your password stays as it is.',
  ].join('\n'),
});
