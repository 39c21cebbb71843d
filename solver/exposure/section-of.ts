import type { Profile } from '../section/profile.ts';
import { elementsExposure } from './section-elements.ts';
import { ellipseExposure } from './section-ellipse.ts';
import type { SectionExposure } from './section-exposure.ts';
import { rectangleExposure } from './section-rectangle.ts';

/** Sections by profile and size; cleared when it holds more than a chip being edited can need. */
const known = new Map<string, SectionExposure>();
const MOST = 2000;

/** Width and depth in metres, as for `sectionOf`. Kept: the same section is worked out once. */
export function sectionExposure(
  profile: Profile,
  width: number,
  depth: number,
  where: string,
): SectionExposure {
  const key = `${profile.kind === 'polygon' ? polygonKey(profile) : JSON.stringify(profile)} ${width} ${depth}`;
  let found = known.get(key);
  if (!found) {
    if (known.size >= MOST) known.clear();
    found = make(profile, width, depth, where);
    known.set(key, found);
  }
  return found;
}

function make(profile: Profile, width: number, depth: number, where: string): SectionExposure {
  switch (profile.kind) {
    case 'rectangle':
      return rectangleExposure(width, depth);
    case 'circle':
    case 'ellipse':
      return ellipseExposure(width, depth);
    default:
      return elementsExposure(profile, width, depth, where);
  }
}

const polygonKeys = new WeakMap<Profile, string>();

/** A measured outline may have thousands of points: its text is made once. */
function polygonKey(profile: Profile): string {
  let key = polygonKeys.get(profile);
  if (key === undefined) {
    key = JSON.stringify(profile);
    polygonKeys.set(profile, key);
  }
  return key;
}
