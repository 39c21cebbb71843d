import type { DrawingSummary } from '../contract/bring-in.ts';
import type { Drawing } from './drawing.ts';
import { boxOf } from './frame.ts';
import { suggestedRole } from './settings.ts';

/** What a drawing holds, for whoever says what its layers are. */
export function summary(drawing: Drawing): DrawingSummary {
  const box = boxOf(drawing.layers);
  return {
    drawing: drawing.format,
    unit: drawing.unit,
    unitSays: drawing.unitSays,
    entities: drawing.entities,
    extent: box && [box.x1 - box.x0, box.y1 - box.y0],
    layers: drawing.layers.map(({ name, regions, tracks, lines }) => ({
      name,
      regions: regions.length,
      paths: tracks.length,
      lines: lines.length,
      role: suggestedRole(name, 1).kind,
    })),
    notUnderstood: [...drawing.notUnderstood],
  };
}
