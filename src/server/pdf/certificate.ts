import { attachedText } from '~/domain/certificates/canonical';
import { formatCode } from '~/domain/certificates/code';
import { fullNumber } from '~/domain/certificates/statement';
import type {
  CertificateStatement,
  StatedInstrument,
  StatedPoint,
  StatementSignature,
} from '~/domain/certificates/statement';
import { formatDay, formatTimeOf } from '~/lib/dates';
import { drawFacts, drawHead, drawParagraph, drawShortHead, drawTitle } from './blocks';
import { COLOURS } from './colours';
import { drawFeet, finish } from './document';
import { Flow } from './flow';
import { drawLimitBars, worstBars } from './limit-bar';
import { drawQr } from './qr';
import { printedVerdict, readingTables, ruleSentences } from './reading-table';
import { drawTable } from './table';
import { layOutTag } from './tag';
import { style, wrapSpans, wrapText } from './text-layout';

const GRADES: Record<StatedInstrument['grade'], string> = {
  accredited: 'accredited calibration',
  checked: 'checked against another',
  unchecked: 'unchecked: its published specification alone',
};

const BODY = style('text', 9.6);
const STRONG = style('strong', 9.6);
const SMALL = style('text', 8.6, COLOURS.quiet);
const SMALL_STRONG = style('strong', 8.6, COLOURS.quiet);
const QR_SIDE = 64;
/** The smallest still sets quiet text in 6.5 points, and what stands under a value in 6. */
const SCALES = [1, 0.93, 0.87, 0.81, 0.76] as const;

/**
 * The certificate as a PDF file: one page of A4, more only where the readings need them. Pure of clock and chance: the
 * same statement and signature give the same bytes. The signed statement is attached as `<number>.json`.
 *
 * @param signature over `signedText(statement)`; it is printed and attached as given, and not checked here
 */
export async function renderCertificate(
  statement: CertificateStatement,
  signature: StatementSignature,
): Promise<Uint8Array> {
  const number = fullNumber(statement);
  const { works, unit } = statement;
  const flow = layOut(statement, signature);
  return finish(flow, {
    title: `Final test certificate ${number}: ${unit.model}, ${unit.serial}`,
    author: works.name,
    subject: `Final test of ${unit.model}, serial number ${unit.serial}`,
    keywords: [number, unit.serial, formatCode(statement.code)],
    madeAt: new Date(`${statement.issuedOn}T00:00:00Z`),
    attachment: {
      name: `${number.replace(/[^\p{L}\p{N}._-]/gu, '_')}.json`,
      description: 'The statement of this certificate with all readings, its signature and how to check it',
      text: attachedText(statement, signature),
    },
  });
}

/** On as few pages as can be, and as large as goes on them. */
function layOut(statement: CertificateStatement, signature: StatementSignature): Flow {
  const [full, ...smaller] = SCALES;
  let best = layOutAt(full, statement, signature);
  for (const scale of smaller) {
    if (best.sheet.pageCount === 1) break;
    const flow = layOutAt(scale, statement, signature);
    if (flow.sheet.pageCount < best.sheet.pageCount) best = flow;
  }
  return best;
}

function layOutAt(scale: number, statement: CertificateStatement, signature: StatementSignature): Flow {
  const number = fullNumber(statement);
  const { works } = statement;
  const flow = new Flow(scale, (next) => drawShortHead(next, works.name, number));
  drawHead(flow, works, 'Certificate', number);
  drawTitle(flow, 'Final test certificate', 'For one unit, measured before it left the bench.');
  drawAmendment(flow, statement);
  drawTag(flow, statement);
  drawFacts(flow, factsOf(statement));
  flow.y += 8;

  for (const table of readingTables(statement.points, flow.sheet.contentWidth)) {
    drawTable(flow, table);
    flow.y += 9;
  }
  drawLimitBars(flow, worstBars(statement.points));
  flow.y += 8;
  drawWords(flow, statement);
  drawCheck(flow, statement, signature);
  drawFeet(
    flow,
    `${number}. The results relate only to the unit tested. Not to be reproduced except in full.`,
  );
  return flow;
}

function drawAmendment(flow: Flow, { replaces }: CertificateStatement): void {
  if (!replaces) return;
  const words = `Amendment to report, serial number ${replaces.number}.`;
  const changes = replaces.changes ?? [];
  const why = [
    `It replaces certificate ${replaces.number}. Why: ${replaces.reason}`,
    ...(changes.length > 0 ? ['What differs:', ...changes] : []),
  ].join(' ');
  drawParagraph(flow, { text: why, style: BODY }, 8, { text: `${words} `, style: STRONG });
}

function drawTag(flow: Flow, { unit, buyer, batchNumber }: CertificateStatement): void {
  const made = [
    ...(buyer?.orderNumber ? [`order ${buyer.orderNumber}`] : []),
    ...(batchNumber ? [`batch ${batchNumber}`] : []),
    ...(unit.bomRevision ? [`BOM rev ${unit.bomRevision}`] : []),
  ].join(', ');
  const tag = layOutTag(
    {
      serial: unit.serial,
      about: [unit.model, unit.options].filter((text) => text !== '').join(' · '),
      right: [
        ...(buyer?.callSign ? [{ text: `Built for ${buyer.callSign}`, quiet: false }] : []),
        ...(made === '' ? [] : [{ text: made, quiet: true }]),
      ],
    },
    flow.sheet.margin,
    flow.sheet.contentWidth,
  );
  flow.need(tag.height);
  tag.draw(flow.sheet, flow.y);
  flow.y += tag.height + 13;
}

function factsOf(statement: CertificateStatement): (readonly [string, string])[] {
  const { conditions, run, testPlan, unit } = statement;
  return [
    ['Tested', formatTimeOf(new Date(statement.testedAt), 'UTC')],
    ['Supply', conditions.supply],
    ['By', [statement.testedBy, statement.place].filter((text) => text !== undefined).join(', ')],
    ['Load, ambient', [conditions.load, conditions.ambient].filter((text) => text !== '').join(', ')],
    ['Test plan', `${testPlan.name} rev ${testPlan.revision}`],
    ['Run', `${run.number}, ${statement.result}${run.note === '' ? '' : ` (${run.note})`}`],
    ['Firmware', unit.firmware],
    ['Issued', `${formatDay(statement.issuedOn)} by ${statement.issuedBy}`],
    ['Alignment', unit.alignment.join('; ')],
  ];
}

/** @param testedOn day of the test, by which a calibration was in date or not */
function instrumentText(
  { name, grade, gradeNote, calibrationDueOn }: StatedInstrument,
  testedOn: string,
): string {
  const isOverdue = calibrationDueOn !== null && calibrationDueOn < testedOn;
  const details = [
    gradeNote === '' ? GRADES[grade] : `${grade === 'checked' ? 'checked' : GRADES[grade]} ${gradeNote}`,
    calibrationDueOn === null
      ? 'no calibration due date'
      : `calibration ${isOverdue ? 'OVERDUE since' : 'due'} ${formatDay(calibrationDueOn)}`,
  ];
  return `${name} (${details.join(', ')})`;
}

function pointName({ label, band }: Pick<StatedPoint, 'label' | 'band'>): string {
  return band === null ? label : `${label}, ${band}`;
}

/** What was not read in this run, so that nobody takes it for a reading. */
function originSentences({ points }: CertificateStatement): string[] {
  const named = (origin: StatedPoint['origin']) =>
    [...new Set(points.filter((point) => point.origin === origin).map(pointName))].join('; ');
  const [history, computed] = [named('history'), named('computed')];
  return [
    ...(history === '' ? [] : [`Taken over from an earlier test sheet, not read in this run: ${history}.`]),
    ...(computed === '' ? [] : [`Computed from other readings of this run: ${computed}.`]),
  ];
}

/** How what was read, where the test plan says more than the quantity does. */
function conditionSentences({ points }: CertificateStatement): string[] {
  const conditions = new Map<string, string[]>();
  for (const { condition, ...point } of points) {
    if (condition === undefined) continue;
    conditions.set(condition, [...(conditions.get(condition) ?? []), pointName(point)]);
  }
  return [...conditions].map(([condition, names]) => `${[...new Set(names)].join('; ')}: ${condition}.`);
}

function concessionSentences({ points }: CertificateStatement): string[] {
  return points
    .filter((point) => printedVerdict(point) === 'concession')
    .map((point) => {
      const { text, limitText, concession } = point;
      return `By concession of the owner: ${pointName(point)}, ${text} where ${limitText} is asked. ${concession}`;
    });
}

function drawWords(flow: Flow, statement: CertificateStatement): void {
  const lead = (text: string) => ({ text: `${text} `, style: STRONG });
  const body = (sentences: readonly string[]) => ({ text: sentences.join(' '), style: BODY });
  const [first = '', ...others] = statement.conformity;
  drawParagraph(flow, body([first]), 3, lead('Statement of conformity.'));
  for (const paragraph of others) drawParagraph(flow, body([paragraph]), 3);
  drawParagraph(flow, body(statement.notAssessed), 3);
  const departures = [
    ...statement.deviations,
    ...concessionSentences(statement),
    ...originSentences(statement),
  ];
  if (departures.length > 0) drawParagraph(flow, body(departures), 3, lead('Departures.'));

  flow.y += 2;
  const testedOn = statement.testedAt.slice(0, 10);
  const small = (name: string, sentences: readonly string[]) => {
    const text = sentences.filter((sentence) => sentence !== '').join(' ');
    if (text === '') return;
    drawParagraph(flow, { text, style: SMALL }, 2.5, { text: `${name} `, style: SMALL_STRONG });
  };
  small('Decided by:', [statement.decisionRule, ...ruleSentences(statement.points)]);
  small('Measured with:', [
    statement.instruments.length === 0
      ? ''
      : `${statement.instruments.map((each) => instrumentText(each, testedOn)).join('; ')}.`,
    statement.path === '' ? '' : `By way of ${statement.path}.`,
    ...conditionSentences(statement),
    'Figures are at the unit; what the meters showed is in the attached data.',
    `Computation ${statement.computationVersion}.`,
  ]);
  small('What it does not mean:', statement.cautions);
}

function drawCheck(
  flow: Flow,
  { code, checkUrl, issuedBy, issuedOn }: CertificateStatement,
  signature: StatementSignature,
) {
  const x = flow.sheet.margin + QR_SIDE + 18;
  const width = flow.sheet.contentWidth - QR_SIDE - 18;
  const paragraphs = [
    wrapText(`Issued by ${issuedBy}, ${formatDay(issuedOn)}`, BODY, width),
    wrapSpans(
      [
        { text: 'Check it: scan, or type ', style: BODY },
        { text: formatCode(code), style: style('mono', 9.6) },
        { text: ' on the page', style: BODY },
      ],
      width,
    ),
    wrapText(checkUrl, style('mono', 8.2, COLOURS.quiet), width),
    wrapText(
      `Signed with the works’ key ${signature.keyId} (${signature.algorithm}). The readings are attached to this file as data.`,
      SMALL,
      width,
    ),
  ];
  const { sheet } = flow;
  flow.y += 8;
  flow.need(QR_SIDE + 6);
  drawQr(sheet, checkUrl, sheet.margin, flow.y, QR_SIDE);
  let end = flow.y + 2;
  for (const lines of paragraphs) end = sheet.as('P', () => sheet.lines(lines, x, end));
  flow.y = Math.max(end, flow.y + QR_SIDE);
}
