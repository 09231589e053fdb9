import 'server-only';
import { createTransport, type Transporter } from 'nodemailer';
import { env } from './env';
import { mailHtml } from './mail-html';

const held = globalThis as { midfringeMail?: Transporter };

/** A mail server that hangs gives up well before its mail counts as left by a crash. */
const PATIENCE = { connectionTimeout: 20_000, greetingTimeout: 20_000, socketTimeout: 40_000 };

/** Sends one mail, as plain text and as a page. The message id is given so that a second delivery can be told from a second mail. */
export async function sendMail(mail: {
  id: string;
  to: string;
  subject: string;
  text: string;
}): Promise<void> {
  held.midfringeMail ??= createTransport({ url: env().SMTP_URL, ...PATIENCE }, { from: env().MAIL_FROM });
  await held.midfringeMail.sendMail({
    messageId: `<${mail.id}@midfringe>`,
    to: mail.to,
    subject: mail.subject,
    text: mail.text,
    html: mailHtml(mail.subject, mail.text),
  });
}
