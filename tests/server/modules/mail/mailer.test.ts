import { afterAll, beforeAll, expect, test } from 'vitest';
import { createLog } from '#server/lib/log.ts';
import { createMailer, type Mailer } from '#server/modules/mail/mailer.ts';
import { invitationMessage, resetMessage } from '#server/modules/mail/messages.ts';

let mailer: Mailer;
beforeAll(async () => {
  mailer = await createMailer({
    smtpUrl: null,
    from: 'Selvage <selvage@localhost>',
    log: createLog('silent'),
  });
});
afterAll(() => mailer.close());

test('a message arrives in the built-in mailbox, newest first', async () => {
  await mailer.send({ to: 'a@test.example', subject: 'First', text: 'One\nline' });
  await mailer.send({ to: 'b@test.example', subject: 'Grüße', text: 'Zwei' });
  expect(mailer.caught()).toMatchObject([
    { to: 'b@test.example', subject: 'Grüße', text: expect.stringContaining('Zwei') as string },
    {
      to: 'a@test.example',
      subject: 'First',
      text: expect.stringContaining('One\nline') as string,
    },
  ]);
});

test('OU-04 a name can neither add a recipient nor a header', async () => {
  const evil = 'Eve\r\nBcc: victim@test.example\r\n\r\nBuy now';
  const message = invitationMessage({
    to: 'c@test.example',
    link: 'http://localhost:4310/accept/x',
    invitedBy: evil,
    deposit: { name: evil, role: 'viewer' },
  });
  expect(message.subject).not.toMatch(/[\r\n]/);
  await mailer.send({ ...message, subject: evil });
  const [caught] = mailer.caught() ?? [];
  expect(caught).toMatchObject({
    to: 'c@test.example',
    subject: 'Eve Bcc: victim@test.example Buy now',
  });
  expect(caught?.text).not.toMatch(/^Bcc:/m);
});

test('messages are plain text with the whole link', () => {
  const link = 'https://selvage.example/reset/abc_DEF-123';
  expect(resetMessage({ to: 'a@test.example', link }).text).toContain(`\n${link}\n`);
  const invitation = invitationMessage({
    to: 'a@test.example',
    link,
    invitedBy: 'Ada',
    deposit: { name: 'Larkspur Hill', role: 'site-geologist' },
  });
  expect(invitation.text).toContain(
    'Ada invites you to the deposit Larkspur Hill as site geologist.',
  );
  expect(invitation.text).toContain(`\n${link}\n`);
});
