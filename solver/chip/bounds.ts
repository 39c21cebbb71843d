/**
 * What a chip may hold at most. Checked before anything is built from a text or an edit, so that no
 * input, however absurd, costs more than reading it.
 */
export const BOUNDS = {
  /** Characters of a description. */
  text: 128_000_000,
  layers: 64,
  channels: 200_000,
  chambers: 20_000,
  keepOuts: 2_000,
  vias: 50_000,
  ports: 50_000,
  targets: 100_000,
  limits: 1_000,
  accepted: 10_000,
  /** Points of all paths and outlines together. */
  points: 1_000_000,
  /** Points of one measured cross-section. */
  profilePoints: 10_000,
  tubing: 20,
  curve: 1_000,
  fluidRows: 1_000,
  /** Characters. */
  id: 64,
  name: 200,
  note: 10_000,
  /** Nanometres: every coordinate lies within one metre of the origin, and no length is larger. */
  coordinate: 1_000_000_000,
  /** Changes in one edit, and characters of its label. */
  changes: 400_000,
  label: 200,
} as const;
