import { z } from 'zod';
import type { PanelSpec } from '~/domain/catalog/panel';

const part = z.object({
  key: z.string(),
  label: z.string(),
  x: z.number(),
  y: z.number(),
  r: z.number(),
  optionKey: z.string().optional(),
});

const panel: z.ZodType<PanelSpec> = z.object({
  name: z.string(),
  widthMm: z.number(),
  heightMm: z.number(),
  nameAt: z.object({ x: z.number(), y: z.number() }),
  display: z.object({
    x: z.number(),
    y: z.number(),
    widthMm: z.number(),
    heightMm: z.number(),
    text: z.string(),
  }),
  knobs: z.array(part.extend({ kind: z.enum(['tuning', 'pointer']), pointerDeg: z.number().optional() })),
  sockets: z.array(part),
  lamps: z.array(
    z.object({
      key: z.string(),
      label: z.string(),
      x: z.number(),
      y: z.number(),
      text: z.string().optional(),
      fixed: z.boolean().optional(),
    }),
  ),
  callOuts: z.array(
    z.object({
      key: z.string(),
      to: z.string(),
      side: z.enum(['left', 'right']),
      at: z.enum(['top', 'bottom']),
    }),
  ),
});

/** A panel as the database keeps it. */
export function parsePanel(value: unknown): PanelSpec {
  return panel.parse(value);
}
