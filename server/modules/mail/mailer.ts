import { createTransport } from 'nodemailer';
import type { MailboxMessage } from '#contract/health.ts';
import type { Log } from '#server/lib/log.ts';
import { startCatcher } from './catcher.ts';

export interface Message {
  to: string;
  subject: string;
  /** Plain text, the whole body. */
  text: string;
}

export interface Mailer {
  /** Hands a message to the mail server. @throws when the server does not take it. */
  send(message: Message): Promise<void>;
  /** What the built-in server caught, newest first; null when a real one is used. */
  caught(): MailboxMessage[] | null;
  close(): Promise<void>;
}

interface MailSettings {
  /** `null`: a built-in server on this machine catches everything. */
  smtpUrl: string | null;
  from: string;
  log: Log;
}

const TIMEOUT_MS = 20_000;

/** One line without control characters: a subject is never allowed to become a header. */
const oneLine = (text: string): string => text.replaceAll(/\p{Cc}+/gu, ' ').slice(0, 200);

export async function createMailer({ smtpUrl, from, log }: MailSettings): Promise<Mailer> {
  const catcher = smtpUrl === null ? await startCatcher(log) : null;
  const transport = createTransport({
    url: smtpUrl ?? catcher?.url ?? '',
    connectionTimeout: TIMEOUT_MS,
    socketTimeout: TIMEOUT_MS,
    disableFileAccess: true,
    disableUrlAccess: true,
  });
  return {
    async send({ to, subject, text }) {
      await transport.sendMail({
        from,
        to: { name: '', address: to },
        subject: oneLine(subject),
        text,
      });
    },
    caught: () => catcher?.messages() ?? null,
    async close() {
      transport.close();
      await catcher?.close();
    },
  };
}
