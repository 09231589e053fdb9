import { mkdir, rename, writeFile } from 'node:fs/promises';
import path from 'node:path';

/** A local mail server that sends nothing on: every mail becomes a file. */
export async function startMail({ data, port }) {
  const { SMTPServer } = await import('smtp-server');
  const folder = path.join(data, 'mails');
  await mkdir(folder, { recursive: true });
  let count = 0;
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS'],
    logger: false,
    onData(stream, session, callback) {
      const parts = [];
      stream.on('data', (part) => parts.push(part));
      stream.on('end', () => {
        count += 1;
        const id = `${new Date().toISOString().replaceAll(':', '-')}-${String(count).padStart(4, '0')}`;
        const raw = Buffer.concat(parts);
        const to = session.envelope.rcptTo.map(({ address }) => address).join(', ');
        keep(folder, id, raw, { id, to, ...readMail(raw) }).then(() => callback(), callback);
      });
    },
  });
  await new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, '127.0.0.1', resolve);
  });
  server.on('error', (problem) => console.error(`The local mail server: ${problem.message}`));
  return {
    env: { SMTP_URL: `smtp://127.0.0.1:${port}`, MAIL_FOLDER: folder },
    stop: () => new Promise((resolve) => server.close(resolve)),
  };
}

/** The list of mails reads the .json files, so that one appears last and whole. */
async function keep(folder, id, raw, mail) {
  await writeFile(path.join(folder, `${id}.eml`), raw);
  const file = path.join(folder, `${id}.json`);
  await writeFile(`${file}.new`, JSON.stringify(mail, null, 1));
  await rename(`${file}.new`, file);
}

/** Headers and body of a mail or of one part of it (RFC 5322). */
function partOf(text) {
  const split = text.indexOf('\r\n\r\n');
  const head = text.slice(0, split).replace(/\r\n[ \t]+/g, ' ');
  const header = (name) => head.match(new RegExp(`^${name}:\\s*(.*)$`, 'im'))?.[1].trim() ?? '';
  return { header, body: text.slice(split + 4) };
}

/** The plain text of a mail: its only part, or the one beside the page of the same words (RFC 2046, 5.1.4). */
function plainPart(mail) {
  const boundary = /^multipart\/.*boundary="?([^";]+)"?/i.exec(mail.header('Content-Type'))?.[1];
  if (!boundary) return mail;
  const parts = mail.body
    .split(`--${boundary}`)
    .slice(1, -1)
    .map((part) => partOf(part.replace(/^\r\n/, '')));
  return parts.find((part) => /^text\/plain/i.test(part.header('Content-Type'))) ?? mail;
}

/** Subject, text and links of a mail (RFC 5322, 2045, 2047), as this product sends them. */
export function readMail(raw) {
  const mail = partOf(raw.toString('latin1'));
  const { header } = mail;
  const plain = plainPart(mail);
  const body = decodeBody(plain.body, plain.header('Content-Transfer-Encoding').toLowerCase()).trimEnd();
  return {
    subject: decodeWords(header('Subject')),
    at: new Date(header('Date') || Date.now()).toISOString(),
    text: body,
    links: body.match(/https?:\/\/[^\s<>"]+/g) ?? [],
  };
}

function decodeBody(body, encoding) {
  if (encoding === 'base64') return Buffer.from(body, 'base64').toString('utf8');
  if (encoding === 'quoted-printable') return fromQuoted(body.replace(/=\r\n/g, '')).replaceAll('\r\n', '\n');
  return Buffer.from(body, 'latin1').toString('utf8').replaceAll('\r\n', '\n');
}

function fromQuoted(text) {
  const bytes = text.replace(/=([0-9A-F]{2})/gi, (_, hex) => String.fromCharCode(parseInt(hex, 16)));
  return Buffer.from(bytes, 'latin1').toString('utf8');
}

function decodeWords(text) {
  return text
    .replace(/\?=\s+=\?/g, '?==?')
    .replace(/=\?utf-8\?([bq])\?(.*?)\?=/gi, (_, kind, word) =>
      kind.toLowerCase() === 'b'
        ? Buffer.from(word, 'base64').toString('utf8')
        : fromQuoted(word.replaceAll('_', ' ')),
    );
}
