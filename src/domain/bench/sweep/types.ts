/** Units a level may be stated in. `dB` is a ratio to something the file does not name. */
export type LevelUnit = 'dBm' | 'dBµV' | 'dBmV' | 'dBV' | 'W' | 'mW' | 'V' | 'dB';

/** Units of the frequency column. */
export type FreqUnit = 'Hz' | 'kHz' | 'MHz' | 'GHz';

/** What a person answers to the reader's questions or corrects; each overrides what the file says. */
export interface SweepHints {
  freqUnit?: FreqUnit;
  levelUnit?: LevelUnit;
  /** Columns, counted from 0 in the file. */
  freqColumn?: number;
  levelColumn?: number;
  rbwHz?: number;
  detector?: string;
}

/** Something that the file leaves open. */
export interface SweepQuestion {
  about: 'trace' | 'frequency unit' | 'level unit' | 'bandwidth' | 'detector' | 'carriers';
  text: string;
  /** Only a stated value answers it; otherwise it is enough to say that what was understood is right. */
  needsValue: boolean;
}

/** How the file was taken. */
export interface Understood {
  form: 'columns' | 'matrix' | 'row blocks' | 'start and stop';
  /** Name of each column of the file, or its number where it has none. */
  columns: string[];
  freqColumn: number | null;
  levelColumn: number | null;
  units: { freq: FreqUnit; level: LevelUnit | null };
  separator: ',' | ';' | 'tab' | 'blank';
  decimal: '.' | ',';
  encoding: 'UTF-8' | 'UTF-16' | 'Latin-1';
  points: number;
  /** Lowest and highest frequency, Hz. */
  spanHz: [number, number];
  /** Median distance between neighbouring points, Hz. */
  stepHz: number;
  rbwHz: number | null;
  detector: string | null;
  /** Reference level of the analyser, dBm; a level at or over it was overloaded. */
  referenceDbm: number | null;
  /** False where the level is not one that a verdict can rest on. */
  levelCalibrated: boolean;
}

/** A sweep: frequencies rising in Hz; levels in dBm where the unit is known, otherwise as in the file. */
export interface Sweep {
  understood: Understood;
  /** What a person must answer before anything rests on the sweep. */
  questions: SweepQuestion[];
  /** What was done with the file that its reader should know. */
  notes: string[];
  points: { freqHz: Float64Array; level: Float64Array };
}

/** A sweep, or a sentence why the file is none. */
export type SweepResult = ({ ok: true } & Sweep) | { ok: false; reason: string };

/** Largest number of points that is read. */
export const MAX_POINTS = 200_000;
