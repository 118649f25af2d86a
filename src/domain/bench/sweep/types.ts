/** Units a level may be stated in. `dB` is a ratio to something the file does not name. */
export type LevelUnit = 'dBm' | 'dBµV' | 'dBmV' | 'dBV' | 'W' | 'mW' | 'V' | 'dB';

/** Units of the frequency column. */
export type FreqUnit = 'Hz' | 'kHz' | 'MHz' | 'GHz';

/** What a person answers to the reader's questions; each overrides what the file says. */
export interface SweepHints {
  freqUnit?: FreqUnit;
  levelUnit?: LevelUnit;
  /** Column of the level, counted from 0 in the file, where there are several traces. */
  levelColumn?: number;
  rbwHz?: number;
  detector?: string;
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
  questions: string[];
  /** What was done with the file that its reader should know. */
  notes: string[];
  points: { freqHz: Float64Array; level: Float64Array };
}

/** A sweep, or a sentence why the file is none. */
export type SweepResult = ({ ok: true } & Sweep) | { ok: false; reason: string };

/** Largest number of points that is read. */
export const MAX_POINTS = 200_000;
