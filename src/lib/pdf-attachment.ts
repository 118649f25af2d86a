/**
 * The first file embedded in a PDF, as text; null where none is found. Not a reader of PDF: it looks for a stream of type
 * EmbeddedFile that is plain or compressed by Flate, as this program writes it. A file that was encrypted, or rewritten
 * by another program, may hide it.
 */
export async function firstAttachment(pdf: Uint8Array<ArrayBuffer>): Promise<string | null> {
  // Latin-1 keeps one character a byte, so places in the text are places in the file.
  const text = new TextDecoder('latin1').decode(pdf);
  for (const { index } of text.matchAll(/\/Type\s*\/EmbeddedFile\b/gu)) {
    const start = text.lastIndexOf(' obj', index);
    const head = /stream\r?\n/u.exec(text.slice(index));
    if (start < 0 || head === null) continue;
    const dictionary = text.slice(start, index + head.index);
    const from = index + head.index + head[0].length;
    const length = Number(/\/Length\s+(\d+)(?!\s+\d+\s+R)/u.exec(dictionary)?.[1] ?? Number.NaN);
    const to = Number.isSafeInteger(length) ? from + length : text.indexOf('endstream', from);
    const bytes = pdf.slice(from, to);
    if (!/\/Filter\b/u.test(dictionary)) return new TextDecoder().decode(bytes);
    if (/\/Filter\s*\[?\s*\/FlateDecode\s*\]?/u.test(dictionary)) return inflated(bytes);
  }
  return null;
}

async function inflated(bytes: Uint8Array<ArrayBuffer>): Promise<string | null> {
  try {
    const stream = new Blob([bytes]).stream().pipeThrough(new DecompressionStream('deflate'));
    return await new Response(stream).text();
  } catch {
    return null;
  }
}
