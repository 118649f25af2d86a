import { AFRelationship, PDFDocument } from 'pdf-lib';
import type { Flow } from './flow';
import { COLOURS } from './colours';
import { style, wrapText } from './text-layout';

type DocumentFacts = {
  title: string;
  author: string;
  subject: string;
  keywords: string[];
  /** The moment that stands in the file as the time of its making: given, since the same input makes the same bytes. */
  madeAt: Date;
  attachment: { name: string; description: string; text: string } | null;
};

const PROGRAM = 'Rigwright';

/** Makes the file from what was laid out. The same input gives the same bytes. */
export async function finish(flow: Flow, facts: DocumentFacts): Promise<Uint8Array> {
  const document = await PDFDocument.create({ updateMetadata: false });
  document.setTitle(facts.title, { showInWindowTitleBar: true });
  document.setAuthor(facts.author);
  document.setSubject(facts.subject);
  document.setKeywords(facts.keywords);
  document.setLanguage('en');
  document.setCreator(PROGRAM);
  document.setProducer(`${PROGRAM}, pdf-lib`);
  document.setCreationDate(facts.madeAt);
  document.setModificationDate(facts.madeAt);
  await flow.sheet.drawInto(document);
  if (facts.attachment) {
    const { name, description, text } = facts.attachment;
    await document.attach(new TextEncoder().encode(text), name, {
      mimeType: 'application/json',
      description,
      creationDate: facts.madeAt,
      modificationDate: facts.madeAt,
      afRelationship: AFRelationship.Data,
    });
  }
  return document.save({ addDefaultPage: false, updateFieldAppearances: false });
}

/** The foot of every page: a quiet sentence on the left, the page's number on the right. */
export function drawFeet(flow: Flow, sentence: string): void {
  const quiet = style('text', 7.8, COLOURS.quiet);
  const { sheet } = flow;
  flow.onEveryPage((page, count) => {
    sheet.decoration(() => {
      sheet.lines(wrapText(sentence, quiet, 400).slice(0, 2), sheet.margin, sheet.height - 52);
      sheet.text(
        `page ${page} of ${count}`,
        sheet.width - sheet.margin,
        sheet.height - 43,
        style('text', 9.4),
        'end',
      );
    });
  });
}
