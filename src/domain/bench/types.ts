import type { Quantity } from './quantities';

/** What a test point came to. `not_run` also covers a reading on which no verdict can rest. */
export type Verdict = 'pass' | 'too_close' | 'fail' | 'not_run';

/** Amateur band by its wavelength, as the trade names it. */
export type BandKey = '160m' | '80m' | '60m' | '40m' | '30m' | '20m' | '17m' | '15m' | '12m' | '10m' | '6m';

/** ITU Region of the Radio Regulations, article 5. */
export type Region = 1 | 2 | 3;

/** How a point is decided (ILAC-G8:09/2019): `guarded` has a guard band w = U, `simple` has w = 0. */
export type Decision = 'guarded' | 'simple';

/**
 * One line of a test plan, with the definition of its quantity. Limits are in the unit of the quantity inside.
 * `limitRule: 'spurious'` takes its limit from the emission rule of the destination instead of `lower`/`upper`.
 * `condition` is an expression over options; it is resolved before a point reaches this code.
 */
export interface TestPoint {
  id: number;
  position: number;
  quantity: Quantity;
  band: BandKey | null;
  /** Transmit frequency of the test, Hz. */
  freqHz: number | null;
  lower: number | null;
  upper: number | null;
  limitRule: 'fixed' | 'spurious';
  decision: Decision;
  required: boolean;
  condition: string | null;
  /** Supply of this point where it is not that of the run, V. */
  supplyV: number | null;
  /** How it is read, where the quantity leaves that open: criterion and bandwidth of a sensitivity. */
  method: string;
}

/** Facts of a model's output stage that formulas need. */
export interface OutputStage {
  /** Output transistors that share the heat. */
  devices: number;
  /** Thermal resistance of each from junction to ambient, K/W; null where it is not stated. */
  thetaKPerW: number | null;
  /** Share of the time with the key down, 0 to 1; 1 for key-down modes. */
  duty: number;
  hasSink: boolean;
}

/** Unit of a half-width in an instrument's specification; `unit` is the SI unit of the quantity itself. */
export type AccuracyUnit = 'dB' | 'percent' | 'ppm' | 'Hz' | 'unit';

/** A half-width with the unit it is stated in. ppm is of the test frequency for Hz, of the reading otherwise. */
export interface SpecHalfWidth {
  halfWidth: number;
  unit: AccuracyUnit;
}

/** What an instrument promises for one quantity. */
export interface QuantitySpec {
  /** Half-widths that apply together, for example 1 percent and 2 mA. */
  accuracy: SpecHalfWidth[];
  /** Step of the last digit shown, with its unit; null where it is not stated. */
  resolution: SpecHalfWidth | null;
}

/** A calibration: expanded uncertainty with its coverage factor, and the day until which it holds (ISO dates). */
export interface InstrumentCalibration {
  expanded: number;
  unit: AccuracyUnit;
  k: number;
  calibratedOn: string | null;
  dueOn: string;
  laboratory: string | null;
  certificateNumber: string | null;
}

/** A diode peak detector: V of line = tapRatio · (V shown + dropV). */
export interface PeakDetector {
  /** Forward drop of the diode at that current, V. */
  dropV: number;
  /** Line voltage over the voltage at the tap: 1 across the whole load, 2 at half of it. */
  tapRatio: number;
}

/**
 * Stored with an instrument's revision.
 * accredited: calibrated by an accredited laboratory; checked: compared with another instrument
 * (`checkedAgainst` says which and when); unchecked: its published specification alone.
 */
export interface InstrumentSpec {
  grade: 'accredited' | 'checked' | 'unchecked';
  checkedAgainst: string | null;
  /** By quantity key; `harmonic` covers every harmonic order and spurious products. */
  quantities: Record<string, QuantitySpec>;
  /** Half-width of the level linearity, dB. */
  linearityDb: number | null;
  /** Half-width of the flatness between any two frequencies of its span, dB. */
  flatnessDb: number | null;
  /** Input standing wave ratio, 1 or more. */
  vswr: number | null;
  /** Its own distortion products below the carrier, dBc (negative). */
  ownDistortionDbc: number | null;
  /** Where it is a diode detector: what Vdc stands for. */
  detector: PeakDetector | null;
  calibration: InstrumentCalibration | null;
}

/** One part between the unit and the instrument. */
export interface PathPart {
  /** Of the part in the works' list; null where it is not from there. */
  partNumber: string | null;
  name: string;
  /** Rows of [freqHz, lossDb], rising in frequency; loss is positive. */
  loss: [number, number][];
  /** Expanded uncertainty of the loss, dB, with its coverage factor. */
  uncertaintyDb: number;
  k: number;
  /** Expanded uncertainty (same k) of the loss *difference* between two frequencies, dB; null where not stated. */
  flatnessDb: number | null;
  /** Largest power it stands continuously, W; null where not stated. */
  ratingW: number | null;
  vswr: number | null;
}

/** The ordered parts from the unit to the instrument, or from a generator to the unit. */
export interface PathSpec {
  direction: 'to_instrument' | 'from_generator';
  parts: PathPart[];
}

/** A reading as entered, at the meter. Everything else is computed from it. */
export interface Reading {
  quantityKey: string;
  band: BandKey | null;
  /** Transmit frequency, Hz; for a spurious product the frequency of the product. */
  freqHz: number | null;
  enteredText: string;
  enteredUnit: string;
  /** In the SI unit of the quantity (W, A, Hz), dBc for ratios, 1 or 0 for a check; at the meter. */
  value: number;
  voided: boolean;
  /** True where the product is hidden in the noise: the true one is at most this. */
  atMost?: boolean;
  /** True where the tester showed that the ratio holds with 10 dB more attenuation. */
  attenuationHeld?: boolean;
}

/** What is the same for all points of a run. */
export interface RunContext {
  /** ISO 3166-1 alpha-2 of where the unit goes, null for a unit without a buyer. */
  destinationCountry: string | null;
  region: Region | null;
  /** Supply voltage at the unit, V. */
  supplyV: number | null;
  /** Ambient temperature, °C. */
  ambientC: number | null;
  /** Null where the test plan does not state it. */
  outputStage: OutputStage | null;
  /** Day of the test, ISO date, in the zone of the works. */
  testedOn: string;
  /** Output standing wave ratio of the unit, where stated. */
  unitVswr?: number | null;
}

/** One line of an uncertainty budget; JSON-safe. */
export interface UncertaintyComponent {
  name: string;
  /** Half-width, expanded uncertainty or standard deviation, in the unit of the budget. */
  value: number;
  distribution: Distribution;
  divisor: number;
  /** Standard uncertainty, in the unit of the budget. */
  u: number;
  /** Degrees of freedom; null is infinitely many. */
  nu: number | null;
}

/** Shape assumed for a component; its divisor follows (JCGM 100, 4.3). */
export type Distribution = 'normal' | 'rectangular' | 'triangular' | 'u-shaped';
