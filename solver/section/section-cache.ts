import type { Profile } from './profile.ts';
import type { Section } from './section.ts';
import type { UnitSection } from './unit-section.ts';

/** Changes whenever the same shape may give other numbers, so that kept sections are not mixed up. */
export const SECTION_VERSION = 1;

/** A conductance alone, as tables of tapers need it. */
export interface KeptFlow {
  readonly key: string;
  readonly accuracy: number;
  readonly conductance: number;
}

export interface KeptSections {
  readonly version: number;
  readonly sections: readonly KeptSection[];
  readonly flows: readonly KeptFlow[];
}

export interface KeptSection {
  readonly key: string;
  /** Accuracy that was asked for. */
  readonly accuracy: number;
  readonly unit: UnitSection;
}

/**
 * Solved shapes by key, free of scale, least recently used dropped beyond `limit`. What it holds is plain
 * data: a project keeps `entries()` and gives them back to `load`.
 */
export class SectionCache {
  private readonly limit: number;
  private readonly kept = new Map<string, KeptSection>();
  private readonly flows = new Map<string, KeptFlow>();
  private readonly recent = new WeakMap<
    Profile,
    Map<number, { readonly depth: number; readonly accuracy: number; readonly section: Section }[]>
  >();

  constructor(limit = 4096) {
    this.limit = limit;
  }

  /** The section of that shape as solved for just this accuracy, so that results don't depend on history. */
  get(key: string, accuracy: number): UnitSection | undefined {
    const name = nameOf(key, accuracy);
    const found = this.kept.get(name);
    if (!found) return undefined;
    this.kept.delete(name);
    this.kept.set(name, found);
    return found.unit;
  }

  set(key: string, accuracy: number, unit: UnitSection): void {
    renew(this.kept, nameOf(key, accuracy), { key, accuracy, unit }, this.limit);
  }

  /** Conductance of that shape in its own unit, solved to just this accuracy. */
  flow(key: string, accuracy: number): number | undefined {
    return this.flows.get(nameOf(key, accuracy))?.conductance;
  }

  setFlow(key: string, accuracy: number, conductance: number): void {
    renew(this.flows, nameOf(key, accuracy), { key, accuracy, conductance }, this.limit);
  }

  /** The section of that very profile (by identity: a chip's profiles are immutable) and size. */
  recall(profile: Profile, width: number, depth: number, accuracy: number): Section | undefined {
    return this.recent
      .get(profile)
      ?.get(width)
      ?.find((one) => one.depth === depth && one.accuracy === accuracy)?.section;
  }

  remember(profile: Profile, width: number, depth: number, accuracy: number, section: Section): void {
    let widths = this.recent.get(profile);
    if (!widths || widths.size >= this.limit) {
      widths = new Map();
      this.recent.set(profile, widths);
    }
    const list = widths.get(width);
    if (list && list.length < MOST_DEPTHS) list.push({ depth, accuracy, section });
    else widths.set(width, [{ depth, accuracy, section }]);
  }

  get size(): number {
    return this.kept.size;
  }

  /** Least recently used first. */
  entries(): KeptSections {
    return {
      version: SECTION_VERSION,
      sections: [...this.kept.values()],
      flows: [...this.flows.values()],
    };
  }

  /** Takes over what another cache held; of another version, or not of this form, nothing. Returns how many. */
  load(kept: unknown): number {
    if (!isRecord(kept) || kept.version !== SECTION_VERSION) return 0;
    const list = (value: unknown): unknown[] => (Array.isArray(value) ? value : []);
    const sections = list(kept.sections).filter(isKept);
    const flows = list(kept.flows).filter(isFlow);
    for (const { key, accuracy, unit } of sections) this.set(key, accuracy, unit);
    for (const { key, accuracy, conductance } of flows) this.setFlow(key, accuracy, conductance);
    return sections.length + flows.length;
  }
}

/** Depths and accuracies of one width that are remembered at a time. */
const MOST_DEPTHS = 8;

/** Sets an entry as the newest and drops the oldest beyond the limit. */
function renew<T>(map: Map<string, T>, name: string, value: T, limit: number): void {
  map.delete(name);
  map.set(name, value);
  if (map.size <= limit) return;
  const oldest = map.keys().next();
  if (!oldest.done) map.delete(oldest.value);
}

const nameOf = (key: string, accuracy: number): string => `${accuracy} ${key}`;

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null;
}

const isPositive = (value: unknown): boolean => Number.isFinite(value) && (value as number) > 0;
const isPlace = (value: unknown): boolean =>
  Array.isArray(value) && value.length === 2 && value.every((part) => Number.isFinite(part));

function isFlow(value: unknown): value is KeptFlow {
  return (
    isRecord(value) &&
    typeof value.key === 'string' &&
    isPositive(value.accuracy) &&
    isPositive(value.conductance)
  );
}

function isKept(value: unknown): value is KeptSection {
  if (!isRecord(value) || typeof value.key !== 'string' || !isPositive(value.accuracy)) return false;
  const unit = value.unit;
  return (
    isRecord(unit) &&
    isPositive(unit.conductance) &&
    isPositive(unit.top) &&
    isPlace(unit.topAt) &&
    (unit.peakShear === null
      ? unit.peakShearAt === null
      : isPositive(unit.peakShear) && isPlace(unit.peakShearAt)) &&
    [unit.floorShear, unit.sideShear, unit.error, unit.shearError].every(Number.isFinite) &&
    Array.isArray(unit.wall) &&
    unit.wall.length % 3 === 0 &&
    unit.wall.every((part) => Number.isFinite(part))
  );
}
