import type { AddressInfo } from 'node:net';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import type { MailboxMessage } from '#contract/health.ts';
import type { Log } from '#server/lib/log.ts';

/** Older messages go as new ones come. */
const KEPT = 200;

export interface Catcher {
  url: string;
  /** Newest first. */
  messages(): MailboxMessage[];
  close(): Promise<void>;
}

/** A mail server on a free loopback port that keeps what it is given in memory and delivers nothing. */
export async function startCatcher(log: Log): Promise<Catcher> {
  const kept: MailboxMessage[] = [];
  let lastId = 0;
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['AUTH', 'STARTTLS'],
    size: 1024 * 1024,
    onData(stream, session, done) {
      simpleParser(stream)
        .then((mail) => {
          const to = session.envelope.rcptTo.map((recipient) => recipient.address).join(', ');
          kept.unshift({
            id: ++lastId,
            at: new Date().toISOString(),
            to,
            subject: mail.subject ?? '',
            text: mail.text ?? '',
          });
          kept.length = Math.min(kept.length, KEPT);
          done();
        })
        .catch((error: unknown) =>
          done(error instanceof Error ? error : new Error('unreadable message')),
        );
    },
  });
  server.on('error', (error) =>
    log.error({ event: 'mail.catcher', err: error }, 'the built-in mail server failed'),
  );
  const listening = await new Promise<AddressInfo | string | null>((resolve, reject) => {
    server.server.once('error', reject);
    server.listen(0, '127.0.0.1', () => resolve(server.server.address()));
  });
  if (listening === null || typeof listening === 'string')
    throw new Error('the built-in mail server found no free port');
  return {
    url: `smtp://127.0.0.1:${listening.port}`,
    messages: () => [...kept],
    close: () => new Promise((resolve) => server.close(resolve)),
  };
}
