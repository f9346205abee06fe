import { createTransport } from 'nodemailer';
import type { Logger } from 'pino';
import { messageFor } from '../messages/translate.ts';
import type { Mail, Mailer, MailResult } from './mailer.ts';

interface SmtpMailerOptions {
  smtpUrl: string;
  from: string;
  log: Logger;
}

const CONNECT_TIMEOUT_MS = 10_000;
const ANSWER_TIMEOUT_MS = 20_000;

/** Mail over SMTP. Text only: it reads the same everywhere and nothing in it is fetched from outside. */
export function smtpMailer({ smtpUrl, from, log }: SmtpMailerOptions): Mailer {
  const transport = createTransport({
    url: smtpUrl,
    connectionTimeout: CONNECT_TIMEOUT_MS,
    greetingTimeout: CONNECT_TIMEOUT_MS,
    socketTimeout: ANSWER_TIMEOUT_MS,
    disableFileAccess: true,
    disableUrlAccess: true,
  });

  return {
    async send({ kind, to, locale, values }: Mail): Promise<MailResult> {
      try {
        const { messageId } = await transport.sendMail({
          from,
          to: { name: '', address: to },
          subject: messageFor(`mail.${kind}.subject`, locale, values),
          text: messageFor(`mail.${kind}.text`, locale, values),
          headers: { 'Auto-Submitted': 'auto-generated', 'Content-Language': locale },
        });
        log.info({ kind, messageId }, 'mail accepted by the mail server');
        return { sent: true, messageId };
      } catch (error) {
        const { responseCode, code } = error as { responseCode?: number; code?: string };
        const reason = String(responseCode ?? code ?? 'failed');
        log.error({ kind, reason, err: error }, 'mail was not accepted');
        return { sent: false, reason };
      }
    },
    async close() {
      transport.close();
    },
  };
}
