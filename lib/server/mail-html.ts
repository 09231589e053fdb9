import 'server-only';

const PAGE = 'margin:0;background:#f3f0e8;color:#1a1815;';
const SHEET =
  "max-width:600px;margin:0 auto;padding:32px 24px;font:16px/1.5 'IBM Plex Sans',Arial,sans-serif;color:#1a1815;";
const HEAD =
  'font-size:21px;font-weight:600;margin:0 0 20px;padding-bottom:12px;border-bottom:1.5px solid #7a7366;';
const LINK = 'color:#1a1815;text-decoration:underline;word-break:break-all;';

/** The seven fringes of the product's mark, as letters: mail programs show no drawings unasked. */
const FRINGES = '<p style="margin:0 0 16px;letter-spacing:3px;color:#7a7366;" aria-hidden="true">ıı|ı|ıı</p>';

function escaped(text: string): string {
  return text
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;');
}

function paragraph(text: string): string {
  const linked = escaped(text).replace(
    /https?:\/\/[^\s<>"]+/g,
    (address) => `<a href="${address}" style="${LINK}">${address}</a>`,
  );
  return `<p style="margin:0 0 14px;">${linked.replaceAll('\n', '<br>')}</p>`;
}

/** A mail's plain text as a page in the product's look: the same words, nothing fetched from anywhere. */
export function mailHtml(subject: string, text: string): string {
  const body = text
    .trim()
    .split(/\n{2,}/)
    .map(paragraph)
    .join('');
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><title>${escaped(subject)}</title></head><body style="${PAGE}"><div style="${SHEET}">${FRINGES}<h1 style="${HEAD}">${escaped(subject)}</h1>${body}</div></body></html>`;
}
