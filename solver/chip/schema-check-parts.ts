import type { Profile } from '../section/profile.ts';
import type { Chamber, Channel, KeepOut, Layer, Point, Port, Via } from './chip.ts';
import { checkPump, checkReservoir } from './schema-check-running.ts';
import { checkTolerances } from './schema-check-tolerance.ts';
import { at, Fault, quoted } from './schema-fault.ts';
import { outlineFault } from './schema-outline.ts';
import { between, notNegative, positive } from './schema-range.ts';
import { metres } from './units.ts';
import { formatQuantity } from './units-format.ts';

/** Rules that hold of one part of a chip by itself, whether it comes from a description or from an edit. */

const lengthText = (nm: number): string => formatQuantity(metres(nm), 'length');

function checkOutline(outline: readonly Point[], key: string): void {
  const fault = outlineFault(outline);
  if (fault === null) return;
  let what = 'encloses nothing.';
  let remedy = 'Give at least three points around an area.';
  const path: (string | number)[] = [key];
  if (fault.kind === 'crosses') {
    what = `crosses or touches itself: edge ${fault.edges[0] + 1} meets edge ${fault.edges[1] + 1}.`;
    remedy = 'Order the points once around the area.';
  } else if (fault.kind !== 'empty') {
    path.push(fault.point);
    what = fault.kind === 'doubles' ? 'turns straight back.' : 'repeats the point before it.';
    remedy =
      fault.kind === 'doubles'
        ? 'Take away the spike.'
        : 'Take one of the two away; the outline closes itself.';
  }
  throw new Fault('shape', what, remedy, path);
}

function checkProfile(profile: Profile): void {
  if (profile.kind === 'trapezoid') {
    const { wallAngle } = profile;
    if (!(wallAngle >= 10 && wallAngle <= 170)) {
      throw new Fault(
        'profile',
        `is ${Number(wallAngle.toPrecision(6))}°; a wall leans from 10° to 170° from the floor.`,
        'Give the angle between floor and wall in degrees; 90 is upright.',
        ['profile', 'wallAngle'],
      );
    }
  } else if (profile.kind === 'polygon') {
    at(['profile'], () => checkOutline(profile.points as readonly Point[], 'points'));
  }
}

export function checkLayer(layer: Layer): void {
  positive(layer.depth, 'depth', 'length');
  notNegative(layer.fillet, 'fillet', 'length');
  checkProfile(layer.profile);
  checkTolerances(layer.tolerance);
  const { roof } = layer;
  if (roof === undefined) return;
  at(['roof'], () => {
    positive(roof.modulus, 'modulus', 'modulus');
    positive(roof.thickness, 'thickness', 'length');
    between(roof.poisson, 'poisson', -1, 0.5, true);
    if (roof.constant !== undefined) {
      positive(roof.constant, 'constant', 'number');
      if (roof.law === 'plate') {
        throw new Fault(
          'profile',
          'belongs to the thick law; this roof is a plate.',
          'Take "constant" away, or choose "law": "thick".',
          ['constant'],
        );
      }
    }
  });
}

export function checkChannel(channel: Channel): void {
  const { path, width, bendRadius, depth } = channel;
  if (depth !== undefined) positive(depth, 'depth', 'length');
  checkTolerances(channel.tolerance);
  positive(width[0], 'width', 'length');
  positive(width[1], 'width', 'length');
  notNegative(bendRadius, 'bendRadius', 'length');
  if (path.every((point) => point[0] === path[0]![0] && point[1] === path[0]![1])) {
    throw new Fault('shape', 'has no length.', 'Give at least two different points.', ['path']);
  }
  for (let i = 1; i < path.length; i += 1) {
    const a = path[i - 1]!;
    const b = path[i]!;
    const ux = b[0] - a[0];
    const uy = b[1] - a[1];
    if (ux === 0 && uy === 0) {
      throw new Fault('shape', 'repeats the point before it.', 'Take one of the two away.', ['path', i]);
    }
    if (i + 1 === path.length) break;
    const vx = path[i + 1]![0] - b[0];
    const vy = path[i + 1]![1] - b[1];
    const along = ux * vx + uy * vy;
    if (along < 0 && Math.abs(ux * vy - uy * vx) < -1e-6 * along) {
      throw new Fault(
        'shape',
        'turns straight back, so that the channel covers itself.',
        'Take the vertex away, or lead the path around a bend.',
        ['path', i],
      );
    }
  }
}

export function checkChamber(chamber: Chamber): void {
  checkOutline(chamber.outline, 'outline');
}

export function checkKeepOut({ outline, clearance }: KeepOut): void {
  checkOutline(outline, 'outline');
  notNegative(clearance, 'clearance', 'length');
}

export function checkVia(via: Via): void {
  positive(via.diameter, 'diameter', 'length');
  if (via.layers[0] === via.layers[1]) {
    throw new Fault(
      'reference',
      `lead from ${quoted(via.layers[0])} to itself.`,
      'Name the two layers that the via joins.',
      ['layers'],
    );
  }
}

export function checkPort(port: Port): void {
  notNegative(port.diameter, 'diameter', 'length');
  port.tubing.forEach((tube, i) => {
    at(['tubing', i], () => {
      positive(tube.bore, 'bore', 'length');
      positive(tube.length, 'length', 'length');
    });
  });
  const { pump, reservoir } = port;
  if (pump) at(['pump'], () => checkPump(pump));
  if (reservoir) at(['reservoir'], () => checkReservoir(reservoir));
}

/** What a layer's cross-section asks of a channel that lies on it. */
export function checkOnLayer(channel: Channel, layer: Layer): void {
  const { profile } = layer;
  const depth = channel.depth ?? layer.depth;
  if (profile.kind === 'circle' && channel.width.some((width) => width !== depth)) {
    const wrong = channel.width.find((width) => width !== depth)!;
    throw new Fault(
      'profile',
      `is ${lengthText(wrong)}, but layer ${quoted(layer.id)} holds round bores of its depth, ${lengthText(depth)}.`,
      'Make width and depth equal, or give the layer the profile "ellipse".',
      ['width'],
    );
  }
  if (profile.kind === 'trapezoid') {
    const least = Math.min(...channel.width);
    const narrowing = (2 * depth) / Math.tan((profile.wallAngle * Math.PI) / 180);
    if (narrowing >= least * (1 - 1e-12)) {
      throw new Fault(
        'profile',
        `is ${lengthText(least)}, but walls at ${Number(profile.wallAngle.toPrecision(6))}° meet before the depth of ${lengthText(depth)} is reached.`,
        `Make the channel wider than ${lengthText(narrowing)}, the layer shallower, or choose the profile "triangle".`,
        ['width'],
      );
    }
  }
}
