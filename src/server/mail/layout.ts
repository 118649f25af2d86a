/** A letter ready to be sent; attachments are added by whoever sends it. */
export interface Letter {
  subject: string;
  text: string;
  html: string;
}

/** Who writes: stands at the foot of every letter. */
export interface LetterSender {
  name: string;
  addressLines: readonly string[];
}

/** A part of a letter. Every word in it is plain text; the layout escapes it. */
type Block =
  | { kind: 'paragraph'; text: string }
  /** The one thing to do: a filled button, and its address in full for readers of text. */
  | { kind: 'button'; words: string; url: string }
  | { kind: 'link'; words: string; url: string }
  | { kind: 'facts'; rows: readonly (readonly [label: string, value: string])[] }
  /** The unit's tag with its serial number. */
  | { kind: 'tag'; serial: string; modelName: string };

interface LetterContent {
  sender: LetterSender;
  subject: string;
  heading: string;
  blocks: readonly Block[];
}

// Mail programs drop style sheets, so the look stands inline. Fonts fall back to what a reader has.
const SANS = "'Atkinson Hyperlegible Next', Verdana, 'DejaVu Sans', Arial, sans-serif";
const HEAD = "'Bricolage Grotesque', Verdana, 'DejaVu Sans', Arial, sans-serif";
const MONO = "'Atkinson Hyperlegible Mono', Consolas, 'DejaVu Sans Mono', monospace";
const PORCELAIN = '#f2f3ee';
const SHEET = '#fbfbf8';
const INK = '#17211f';
const QUIET = '#4a5753';
const RULE = '#cfd4cb';
const PATINA = '#1b6a61';
const MANILA = '#ecdcb6';
const MANILA_EDGE = '#cdb67f';
const COPPER = '#a8521f';

/** A sum or a number stays on one line; anything longer may break so that a phone's width holds it. */
const LONGEST_UNBROKEN = 16;

function escapeHtml(text: string): string {
  return text
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;')
    .replaceAll("'", '&#39;');
}

function webAddress(url: string): string {
  const { protocol, href } = new URL(url);
  if (protocol !== 'https:' && protocol !== 'http:') {
    throw new RangeError(`A letter links to web addresses only, not ${protocol}`);
  }
  return href;
}

function anchor(url: string, words: string, style: string): string {
  return `<a href="${escapeHtml(webAddress(url))}" target="_blank" rel="noopener" style="${style}">${escapeHtml(words)}</a>`;
}

function blockHtml(block: Block): string {
  switch (block.kind) {
    case 'paragraph':
      return `<p style="margin:0 0 16px">${escapeHtml(block.text).replaceAll('\n', '<br>')}</p>`;
    case 'button':
      return `<p style="margin:24px 0">${anchor(
        block.url,
        block.words,
        `display:inline-block;padding:12px 20px;background:${PATINA};border-radius:3px;color:#ffffff;font-weight:bold;text-decoration:none`,
      )}</p>`;
    case 'link':
      return `<p style="margin:0 0 16px">${anchor(block.url, block.words, `color:${PATINA}`)}</p>`;
    case 'facts':
      return `<table role="presentation" width="100%" cellpadding="0" cellspacing="0" style="margin:0 0 16px;border-top:1px solid ${RULE}">
${block.rows
  .map(
    ([label, value]) =>
      `<tr><td style="padding:8px 12px 8px 0;border-bottom:1px solid ${RULE};vertical-align:top">${escapeHtml(label)}</td><td align="right" style="padding:8px 0;border-bottom:1px solid ${RULE};vertical-align:top;font-family:${MONO};${value.length <= LONGEST_UNBROKEN ? 'white-space:nowrap' : ''}">${escapeHtml(value)}</td></tr>`,
  )
  .join('\n')}
</table>`;
    case 'tag':
      return `<table role="presentation" cellpadding="0" cellspacing="0" style="margin:0 0 12px"><tr><td style="padding:12px 20px 12px 14px;background:${MANILA};border:1px solid ${MANILA_EDGE}"><span style="display:inline-block;width:10px;height:10px;margin-right:12px;border:3px solid ${COPPER};border-radius:8px;background:${PORCELAIN}"></span><span style="font:bold 20px ${MONO};color:${INK}">${escapeHtml(block.serial)}</span><span style="padding-left:14px;color:${INK}">${escapeHtml(block.modelName)}</span></td></tr></table>`;
  }
}

function blockText(block: Block): string {
  switch (block.kind) {
    case 'paragraph':
      return block.text;
    case 'button':
    case 'link':
      return `${block.words}:\n${webAddress(block.url)}`;
    case 'facts':
      return block.rows.map(([label, value]) => `${label}: ${value}`).join('\n');
    case 'tag':
      return `${block.serial}  ${block.modelName}`;
  }
}

/** Sets a letter as HTML that is read well on a phone, and the same words as text. */
export function setLetter({ sender, subject, heading, blocks }: LetterContent): Letter {
  const foot = [sender.name, ...sender.addressLines];
  const html = `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="color-scheme" content="light">
<title>${escapeHtml(subject)}</title>
</head>
<body style="margin:0;padding:0;background:${PORCELAIN};color:${INK}">
<table role="presentation" width="100%" cellpadding="0" cellspacing="0" style="background:${PORCELAIN}"><tr><td align="center" style="padding:24px 12px">
<table role="presentation" width="100%" cellpadding="0" cellspacing="0" style="max-width:600px;text-align:left;font:16px/1.5 ${SANS};color:${INK}">
<tr><td style="padding:0 0 12px;font:bold 17px ${HEAD}">${escapeHtml(sender.name)}</td></tr>
<tr><td style="padding:24px 20px;background:${SHEET};border:1px solid ${RULE}">
<h1 style="margin:0 0 16px;font:bold 24px/1.2 ${HEAD}">${escapeHtml(heading)}</h1>
${blocks.map(blockHtml).join('\n')}
</td></tr>
<tr><td style="padding:16px 0;font-size:14px;color:${QUIET}">${foot.map(escapeHtml).join('<br>')}</td></tr>
</table>
</td></tr></table>
</body>
</html>
`;
  const text = [heading, ...blocks.map(blockText), `-- \n${foot.join('\n')}`].join('\n\n');
  return { subject, text: `${text}\n`, html };
}
