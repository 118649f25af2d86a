import type { Decision, Verdict } from '~/domain/bench/types';

/** How far an instrument can be trusted: the grade that its owner has stated, printed beside its name. */
type InstrumentGrade = 'accredited' | 'checked' | 'unchecked';

/** Expanded uncertainty of one reading at about 95 % coverage. */
export type StatedUncertainty = {
  /** Half width U, in `unit`. A level converted to W keeps its own unequal interval in `low` and `high`. */
  value: number;
  unit: string;
  /** Coverage factor. */
  k: number;
  /** Interval in the unit of the reading. */
  low: number;
  high: number;
  /** As printed, with its unit and without a leading ±: `0.9 dB`, `5 %`. */
  text: string;
};

/** One test point of the run with what was read there and what follows from it. */
export type StatedPoint = {
  /** Heading of its column or row: `Power`, `2nd harmonic`. */
  label: string;
  /** Stable key of the quantity; points of one key and different bands stand in one column. */
  quantityKey: string;
  /** Band name such as `40 m`; null for what is measured once for the whole unit. */
  band: string | null;
  /** Carrier at which it was read, Hz; null where there is none. */
  freqHz: number | null;
  /** At the unit, unrounded, in `unit`; it is this value that was judged. A yes/no check is 1 or 0. */
  value: number;
  unit: string;
  /** The value at the unit as printed, with its unit. */
  text: string;
  /** What the instrument showed, with its unit. */
  atMeterText: string;
  uncertainty: StatedUncertainty | null;
  /** How many readings were averaged. */
  n: number;
  /** Limits in `unit`; null where there is none on that side. */
  lower: number | null;
  upper: number | null;
  /** The limit as printed: `≤ −47.9 dBc`, `2.4 to 3.6 W`; empty where there is none. */
  limitText: string;
  /** Where the limit comes from: `works' own`, `ITU-R SM.329 category A`. */
  ruleText: string;
  /** `guarded` keeps U away from the limit, `simple` compares as read, after ILAC-G8:09/2019. */
  decision: Decision;
  /** `not_run` is a reading without a limit, for information. */
  verdict: Verdict;
  /** The owner's reason for letting a reading outside the works' own limit go; null where none was needed. */
  concession: string | null;
  /** Where it was not read in this run: computed from other readings of it, or taken over from an old test sheet. */
  origin?: 'computed' | 'history' | undefined;
  /** How it was read, in words: criterion and bandwidth of a sensitivity, a supply that is not the run's. */
  condition?: string | undefined;
};

export type StatedInstrument = {
  name: string;
  grade: InstrumentGrade;
  /** Against what and when it was checked, or who calibrated it; may be empty. */
  gradeNote: string;
  /** Day (`YYYY-MM-DD`) on which calibration falls due; null where it has none. */
  calibrationDueOn: string | null;
};

/**
 * The buyer's part. It stands on the paper and never on the public page, so it is signed only through its digest:
 * whoever holds the paper's data can show that the digest is of these words, and nobody else can guess them from it.
 */
export type BuyerPart = {
  callSign: string | null;
  orderNumber: string | null;
  /** At least 16 random bytes as hex: without it a call sign is guessed from its hash in seconds. */
  salt: string;
};

/** On an amendment, the certificate (number and letter) that it replaces, and why. */
export type Replacement = {
  number: string;
  reason: string;
  /** What differs from it, a sentence each; of the buyer's part only that it differs. */
  changes?: string[] | undefined;
};

/**
 * What is signed and may be shown to anyone. JSON-safe: strings, finite numbers, null, arrays and objects.
 *
 * A member that came in after the first certificates is optional, and is never filled in on reading: a statement has
 * to come out as it was signed.
 */
export type PublicStatement = {
  format: 'certificate-statement/1';
  works: { name: string; addressLines: string[] };
  /** The works' running number, `TC-2027-00412`. */
  number: string;
  /** Empty on the first issue, then `A`, `B`, … */
  letter: string;
  replaces: Replacement | null;
  unit: {
    serial: string;
    model: string;
    /** Chosen options in words, empty where the model has none. */
    options: string;
    bomRevision: string;
    firmware: string;
    /** Alignment values of the unit at the run, in words. */
    alignment: string[];
  };
  batchNumber: string | null;
  /** Lower-case hex SHA-256 of the canonical JSON of the buyer's part; null for a unit without a buyer. */
  buyerDigest: string | null;
  /** The run's number on this unit, and what became of the earlier ones (may be empty). */
  run: { number: number; note: string };
  /** Instant at which the run closed, ISO 8601 in UTC. */
  testedAt: string;
  /** Day of issue, `YYYY-MM-DD`. */
  issuedOn: string;
  testedBy: string;
  /** Where it was tested, in words. */
  place?: string | undefined;
  issuedBy: string;
  conditions: { supply: string; load: string; ambient: string };
  testPlan: { name: string; revision: string };
  result: 'passed' | 'passed by concession';
  points: StatedPoint[];
  instruments: StatedInstrument[];
  /** The parts between the unit and the instrument, in words. */
  path: string;
  decisionRule: string;
  /** Paragraphs: which harmonics, which span, which rule are met. */
  conformity: string[];
  /** Sentences: what was not assessed. */
  notAssessed: string[];
  /** Deviations from the test plan and concessions, in sentences. */
  deviations: string[];
  /** What the certificate does not mean, and the cautions that go with the unit. */
  cautions: string[];
  /** The twelve symbols without dashes. */
  code: string;
  checkUrl: string;
  /** Version of the computation by which the verdicts were reached. */
  computationVersion: string;
};

/** Everything that the paper says. */
export type CertificateStatement = PublicStatement & { buyer: BuyerPart | null };

/** A signature over the canonical text of the public statement, with what a stranger needs to check it. */
export type StatementSignature = {
  algorithm: 'Ed25519';
  keyId: string;
  /** Base64 of the 32 raw bytes. */
  publicKey: string;
  /** Base64 of the 64 bytes. */
  value: string;
};

/** The number as it is printed and looked up: `TC-2027-00412`, then `TC-2027-00412A`. */
export function fullNumber(statement: Pick<PublicStatement, 'number' | 'letter'>): string {
  return statement.number + statement.letter;
}
