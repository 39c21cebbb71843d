import type { Profile } from '../section/profile.ts';
import { elementsExposure } from './section-elements.ts';
import { ellipseExposure } from './section-ellipse.ts';
import type { HuggingPlace, SectionExposure } from './section-exposure.ts';
import { rectangleExposure } from './section-rectangle.ts';

/** Sections by profile, then by size; cleared when it holds more than a chip being edited can need. */
const known = new Map<string, Map<number, Map<number, SectionExposure>>>();
const MOST = 2000;
let count = 0;

/** Width and depth in metres, as for `sectionOf`. Kept: the same section is worked out once. */
export function sectionExposure(
  profile: Profile,
  width: number,
  depth: number,
  where: string,
): SectionExposure {
  if (count >= MOST) {
    known.clear();
    count = 0;
  }
  const widths = inner(inner(known, profileKey(profile)), depth);
  let found = widths.get(width);
  if (!found) {
    found = remembering(make(profile, width, depth, where));
    widths.set(width, found);
    count += 1;
  }
  return found;
}

function inner<K, L, V>(outer: Map<K, Map<L, V>>, key: K): Map<L, V> {
  let map = outer.get(key);
  if (!map) {
    map = new Map();
    outer.set(key, map);
  }
  return map;
}

/** Asked again for the same ball or the same dose, the same answer without working it out. */
function remembering(section: SectionExposure): SectionExposure {
  const places = new Map<number, HuggingPlace | null>();
  const powers = new Map<number, number>();
  return {
    ...section,
    shearPower(exponent) {
      let power = powers.get(exponent);
      if (power === undefined) {
        power = section.shearPower(exponent);
        powers.set(exponent, power);
      }
      return power;
    },
    hugging(diameter) {
      let place = places.get(diameter);
      if (place === undefined) {
        place = section.hugging(diameter);
        places.set(diameter, place);
      }
      return place;
    },
  };
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
function profileKey(profile: Profile): string {
  if (profile.kind === 'trapezoid') return `trapezoid ${profile.wallAngle}`;
  if (profile.kind !== 'polygon') return profile.kind;
  let key = polygonKeys.get(profile);
  if (key === undefined) {
    key = JSON.stringify(profile.points);
    polygonKeys.set(profile, key);
  }
  return key;
}
