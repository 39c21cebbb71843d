import type { Layer } from './chip.ts';

/** How far depths and widths may be off. */

/** Of a layer; a channel has `depth` and `width` of its own. */
export type Tolerances = NonNullable<Layer['tolerance']>;
export type OwnTolerances = Omit<Tolerances, 'common'>;
