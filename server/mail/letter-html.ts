const ESCAPES: Readonly<Record<string, string>> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;' };
const escaped = (text: string): string => text.replace(/[&<>"]/g, (character) => ESCAPES[character] ?? character);

/** The HTML half of a message: its paragraphs, with addresses that stand alone in a line as links. No pictures, no tracking. */
export function letterHtml(subject: string, text: string): string {
  const paragraphs = text.split(/\n{2,}/).map((paragraph) => {
    const lines = paragraph.split('\n').map((line) => {
      const address = line.trim();
      return /^https?:\/\/\S+$/.test(address)
        ? `<a href="${escaped(address)}" style="color:#20242b">${escaped(address)}</a>`
        : escaped(line).replace(/ {2}/g, '&nbsp; ');
    });
    return `<p style="margin:0 0 16px">${lines.join('<br>')}</p>`;
  });
  return [
    '<!doctype html>',
    `<html lang="en"><head><meta charset="utf-8"><title>${escaped(subject)}</title></head>`,
    '<body style="margin:0;padding:24px;background:#f3efe3;color:#20242b;font:16px/1.5 sans-serif">',
    '<div style="max-width:600px;border-top:3px solid #20242b;padding-top:16px">',
    ...paragraphs,
    '</div></body></html>',
  ].join('\n');
}
