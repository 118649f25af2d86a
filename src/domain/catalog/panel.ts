/**
 * A model's front panel, from which it is drawn. Positions and sizes are millimetres from the upper left
 * corner of the panel; x and y of round parts are their centres. JSON-safe.
 */
export interface PanelSpec {
  /** Engraved on the panel. */
  name: string;
  widthMm: number;
  heightMm: number;
  /** Where the name is engraved (left end of its baseline). */
  nameAt: { x: number; y: number };
  display: {
    x: number;
    y: number;
    widthMm: number;
    heightMm: number;
    /** Shown where no lamp that is lit has a text of its own. */
    text: string;
  };
  knobs: readonly PanelKnob[];
  sockets: readonly PanelPart[];
  lamps: readonly PanelLamp[];
  callOuts: readonly PanelCallOut[];
}

/** A round part. With an `optionKey` it is there only if that option is chosen. */
export interface PanelPart {
  key: string;
  label: string;
  x: number;
  y: number;
  /** Radius. */
  r: number;
  optionKey?: string | undefined;
}

export interface PanelKnob extends PanelPart {
  /** `tuning` has a finger dimple, the others a pointer. */
  kind: 'tuning' | 'pointer';
  /** Direction of the pointer in degrees, clockwise from straight up. */
  pointerDeg?: number | undefined;
}

/** A lamp beside the name of its band. */
export interface PanelLamp {
  /** Key of the option that lights it, as `band.40m`. */
  key: string;
  label: string;
  x: number;
  y: number;
  /** What the display shows on this band. */
  text?: string | undefined;
  /** In every unit of this model, whatever is chosen. */
  fixed?: boolean | undefined;
}

/** Where the choices of an option group are led to. */
export interface PanelCallOut {
  /** Key of the option group. */
  key: string;
  /** Key of the part or lamp that it changes. */
  to: string;
  side: 'left' | 'right';
  at: 'top' | 'bottom';
}

/** What of a panel is there, and lit, for the options chosen. */
export interface LitParts {
  /** Keys of the knobs and sockets that are fitted. */
  fitted: ReadonlySet<string>;
  /** Keys of the lamps that are lit. */
  lit: ReadonlySet<string>;
  /** The lamp of the band that the display shows: the last one lit. Null where none is. */
  activeLamp: string | null;
  displayText: string;
}

/** Which parts of a panel a choice of option keys fits, which lamps it lights, and what the display shows. */
export function litParts(spec: PanelSpec, chosen: ReadonlySet<string>): LitParts {
  const parts = [...spec.knobs, ...spec.sockets];
  const fitted = parts.filter((part) => part.optionKey === undefined || chosen.has(part.optionKey));
  const lit = spec.lamps.filter((lamp) => lamp.fixed === true || chosen.has(lamp.key));
  const active = lit.at(-1);
  return {
    fitted: new Set(fitted.map((part) => part.key)),
    lit: new Set(lit.map((lamp) => lamp.key)),
    activeLamp: active?.key ?? null,
    displayText: active?.text ?? spec.display.text,
  };
}
