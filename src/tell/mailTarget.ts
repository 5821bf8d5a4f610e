import { access } from 'node:fs/promises';
import nodemailer from 'nodemailer';
import type { TellEntry } from '../method/site.js';
import type { Message, Target } from './message.js';

/**
 * Mail by SMTP: plain text and small HTML, the PDF report attached when the site asks for it.
 *
 * @param mail     the site file's entry
 * @param password value of the environment variable it names
 */
export function mailTarget(mail: NonNullable<TellEntry['mail']>, on: readonly string[], password: string | undefined): Target {
  return {
    name: `mail ${mail.to.join(', ')}`,
    on,
    send: async (message: Message, signal: AbortSignal) => {
      const transport = nodemailer.createTransport({
        url: mail.server,
        connectionTimeout: 8000,
        greetingTimeout: 8000,
        socketTimeout: 8000,
        disableFileAccess: false,
        disableUrlAccess: true,
        ...(mail.user !== undefined && password !== undefined ? { auth: { user: mail.user, pass: password } } : {}),
      } as object);
      const stop = () => transport.close();
      signal.addEventListener('abort', stop, { once: true });
      try {
        await transport.sendMail({
          from: mail.from ?? 'kinetrail@localhost',
          to: [...mail.to],
          subject: oneLine(`${message.run}: ${message.event.replaceAll('-', ' ')}`),
          messageId: `<${message.key}@kinetrail>`,
          text: textOf(message),
          html: `<p><strong>${escapeText(message.run)}</strong>: ${escapeText(message.event.replaceAll('-', ' '))}</p><p>${escapeText(message.evidence)}</p>${message.report !== undefined ? `<p>Report: ${escapeText(message.report)}</p>` : ''}<p>${caution}</p>`,
          attachments: mail.attachReport === true ? await reportOf(message) : [],
        });
        return undefined;
      } finally {
        signal.removeEventListener('abort', stop);
        transport.close();
      }
    },
  };
}

const caution = 'This message supports, and does not replace, the judgement of a qualified chemist; it is not a safety function.';

function textOf({ run, event, evidence, report }: Message): string {
  return [
    `${run}: ${event.replaceAll('-', ' ')}`,
    '',
    evidence,
    ...(report !== undefined ? ['', `Report: ${report}`] : []),
    '',
    caution,
    '',
  ].join('\n');
}

async function reportOf({ report }: Message): Promise<{ filename: string; path: string }[]> {
  if (report === undefined) return [];
  const path = report.replace(/\.html$/, '.pdf');
  return access(path).then(
    () => [{ filename: 'report.pdf', path }],
    () => [],
  );
}

const oneLine = (text: string) => text.replace(/[\u0000-\u001f\u007f]+/g, ' ').slice(0, 200);
const escapeText = (text: string) => text.replace(/[&<>"']/g, (character) => `&#${character.charCodeAt(0)};`);
