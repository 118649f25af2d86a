import type { ReactNode } from 'react';
import type {
  LitParts,
  PanelCallOut,
  PanelKnob,
  PanelLamp,
  PanelPart,
  PanelSpec,
} from '~/domain/catalog/panel';
import { litParts } from '~/domain/catalog/panel';

interface Props {
  spec: PanelSpec;
  /** Keys of the options chosen. */
  chosen: ReadonlySet<string>;
  /**
   * The choices themselves, by the key of their option group, each with its own heading. They stand beside
   * the part that they change, or numbered beneath the drawing where the window is narrow. Without them the
   * panel alone is drawn.
   */
  callOuts?: Readonly<Record<string, ReactNode>> | undefined;
}

/** How far a leader runs beyond the case towards its words, mm. */
const REACH = 12.5;
/** Height of the leaders at the case's edge, as a part of the case's height. The words' own offsets match it. */
const LEVEL = { top: 0.2, bottom: 0.8 } as const;
const LAMP_RADIUS = 1.3;

/** A model's front panel as it will be built with the options chosen. */
export function PanelDrawing({ spec, chosen, callOuts }: Props) {
  const parts = litParts(spec, chosen);
  const shown = callOuts === undefined ? [] : spec.callOuts.filter((callOut) => callOut.key in callOuts);
  const drawing = (
    <div className="panel-drawing">
      <svg
        viewBox={`0 0 ${spec.widthMm} ${spec.heightMm}`}
        className="block w-full overflow-visible"
        role="img"
        aria-label={describe(spec, parts)}
      >
        <Case spec={spec} text={parts.displayText} />
        {spec.lamps.map((lamp) => (
          <Lamp
            key={lamp.key}
            lamp={lamp}
            lit={parts.lit.has(lamp.key)}
            active={parts.activeLamp === lamp.key}
          />
        ))}
        {spec.knobs.map((knob) => (
          <Knob key={knob.key} knob={knob} fitted={parts.fitted.has(knob.key)} />
        ))}
        {spec.sockets.map((socket) => (
          <Socket key={socket.key} socket={socket} fitted={parts.fitted.has(socket.key)} />
        ))}
        {shown.map((callOut, index) => (
          <Leader key={callOut.key} spec={spec} callOut={callOut} number={index + 1} />
        ))}
      </svg>
    </div>
  );
  if (callOuts === undefined) return drawing;
  return (
    <div className="panel-with-call-outs">
      {drawing}
      {shown.map((callOut, index) => (
        <div key={callOut.key} className={`call-out call-out-${callOut.side} call-out-${callOut.at}`}>
          <span className="call-out-number" aria-hidden="true">
            {index + 1}
          </span>
          <div className="min-w-0 flex-1">{callOuts[callOut.key]}</div>
        </div>
      ))}
    </div>
  );
}

function describe(spec: PanelSpec, parts: LitParts): string {
  const bands = spec.lamps.filter((lamp) => parts.lit.has(lamp.key)).map((lamp) => `${lamp.label} m`);
  const absent = [...spec.knobs, ...spec.sockets].filter((part) => !parts.fitted.has(part.key));
  const fitted = bands.length === 0 ? 'no band chosen' : `bands ${bands.join(', ')}`;
  const without = absent.length === 0 ? '' : `; not fitted: ${absent.map((part) => part.label).join(', ')}`;
  return `Front panel of ${spec.name}: ${fitted}${without}`;
}

function Case({ spec, text }: { spec: PanelSpec; text: string }) {
  const { widthMm, heightMm, nameAt, display } = spec;
  return (
    <>
      <rect width={widthMm} height={heightMm} rx="1.6" className="fill-case" />
      <rect
        x="3.2"
        y="3.2"
        width={widthMm - 6.4}
        height={heightMm - 6.4}
        rx="1"
        className="fill-face stroke-strip-rule"
        strokeWidth="0.3"
      />
      <text x={nameAt.x} y={nameAt.y} fontSize="3.4" letterSpacing="0.1" className="fill-engraved">
        {spec.name.toUpperCase()}
      </text>
      <rect
        x={display.x}
        y={display.y}
        width={display.widthMm}
        height={display.heightMm}
        rx="0.5"
        className="fill-strip stroke-strip-rule"
        strokeWidth="0.3"
      />
      <text
        x={display.x + display.widthMm / 2}
        y={display.y + display.heightMm / 2}
        fontSize={display.heightMm * 0.54}
        textAnchor="middle"
        dominantBaseline="central"
        className="fill-glow font-mono"
      >
        {text}
      </text>
    </>
  );
}

function Lamp({ lamp, lit, active }: { lamp: PanelLamp; lit: boolean; active: boolean }) {
  const colour = active ? 'fill-strip-ink' : lit ? 'fill-glow' : 'fill-engraved-2';
  return (
    <g className="transition-colors duration-150">
      <circle
        cx={lamp.x}
        cy={lamp.y}
        r={LAMP_RADIUS}
        className={lit ? colour : 'fill-none stroke-engraved-2'}
        strokeWidth="0.25"
      />
      <text
        x={lamp.x + 3.6}
        y={lamp.y}
        fontSize="3.9"
        dominantBaseline="central"
        className={`font-mono ${colour}`}
      >
        {lamp.label}
      </text>
    </g>
  );
}

function Knob({ knob, fitted }: { knob: PanelKnob; fitted: boolean }) {
  if (!fitted) return <Absent part={knob} />;
  const turn = `rotate(${knob.pointerDeg ?? 0} ${knob.x} ${knob.y})`;
  return (
    <g>
      <circle cx={knob.x} cy={knob.y} r={knob.r} className="fill-knob stroke-engraved-2" strokeWidth="0.35" />
      {knob.kind === 'tuning' ? (
        <>
          <circle cx={knob.x} cy={knob.y} r={knob.r * 0.8} className="fill-case" />
          <circle
            cx={knob.x + knob.r * 0.42}
            cy={knob.y - knob.r * 0.47}
            r={knob.r * 0.1}
            className="fill-engraved-2"
          />
        </>
      ) : (
        <line
          x1={knob.x}
          y1={knob.y}
          x2={knob.x}
          y2={knob.y - knob.r * 0.85}
          transform={turn}
          className="stroke-engraved"
          strokeWidth="0.45"
        />
      )}
      <PartLabel part={knob} />
    </g>
  );
}

function Socket({ socket, fitted }: { socket: PanelPart; fitted: boolean }) {
  if (!fitted) return <Absent part={socket} />;
  return (
    <g>
      <circle
        cx={socket.x}
        cy={socket.y}
        r={socket.r}
        className="fill-knob stroke-engraved-2"
        strokeWidth="0.35"
      />
      <circle cx={socket.x} cy={socket.y} r={socket.r * 0.45} className="fill-strip" />
      <PartLabel part={socket} />
    </g>
  );
}

/** A part that the choice does not fit: its outline, dashed. */
function Absent({ part }: { part: PanelPart }) {
  return (
    <g>
      <circle
        cx={part.x}
        cy={part.y}
        r={part.r}
        className="fill-none stroke-engraved-2"
        strokeWidth="0.25"
        strokeDasharray="1 0.8"
      />
      <PartLabel part={part} quiet />
    </g>
  );
}

function PartLabel({ part, quiet = false }: { part: PanelPart; quiet?: boolean }) {
  return (
    <text
      x={part.x}
      y={part.y + part.r + 4}
      fontSize="2.9"
      textAnchor="middle"
      className={`panel-label ${quiet ? 'fill-engraved-2' : 'fill-engraved'}`}
    >
      {part.label}
    </text>
  );
}

/** From a part to its words: a leader in a wide window, a number in a narrow one. */
function Leader({ spec, callOut, number }: { spec: PanelSpec; callOut: PanelCallOut; number: number }) {
  const lamp = spec.lamps.find((candidate) => candidate.key === callOut.to);
  const part = [...spec.knobs, ...spec.sockets].find((candidate) => candidate.key === callOut.to);
  const target = lamp ? { x: lamp.x, y: lamp.y, r: LAMP_RADIUS } : part;
  if (target === undefined) return null;
  const outwards = callOut.side === 'left' ? -1 : 1;
  const startX = target.x + outwards * target.r;
  const elbowX = startX + outwards * 6.4;
  const endX = callOut.side === 'left' ? -REACH : spec.widthMm + REACH;
  const level = spec.heightMm * LEVEL[callOut.at];
  return (
    <>
      <g className="hidden xl:block">
        <path
          d={`M${startX} ${target.y}H${elbowX}V${level}H${endX}`}
          className="fill-none stroke-leader"
          strokeWidth="0.35"
        />
        <circle cx={startX} cy={target.y} r="0.9" className="fill-leader" />
      </g>
      <g className="xl:hidden">
        <circle cx={startX + outwards * 2.6} cy={target.y} r="3.2" className="fill-leader" />
        <text
          x={startX + outwards * 2.6}
          y={target.y}
          fontSize="4.4"
          textAnchor="middle"
          dominantBaseline="central"
          className="fill-strip font-bold"
        >
          {number}
        </text>
      </g>
    </>
  );
}
