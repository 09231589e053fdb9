import 'server-only';
import { createTransport, type Transporter } from 'nodemailer';
import { env } from './env';

const held = globalThis as { midfringeMail?: Transporter };

/** Sends one mail. The message id is given so that a second delivery can be told from a second mail. */
export async function sendMail(mail: {
  id: string;
  to: string;
  subject: string;
  text: string;
}): Promise<void> {
  held.midfringeMail ??= createTransport({ url: env().SMTP_URL }, { from: env().MAIL_FROM });
  await held.midfringeMail.sendMail({
    messageId: `<${mail.id}@midfringe>`,
    to: mail.to,
    subject: mail.subject,
    text: mail.text,
  });
}
