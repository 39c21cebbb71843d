/**
 * Who may import what. Imports run downward only; `imports.test.ts` walks every import statement
 * (type-only ones count) and names file, line, offender and what is allowed.
 *
 * A room is the longest folder prefix listed here. `ours` lists rooms whose files may be imported,
 * `packages` the npm packages, `node` whether `node:` modules may be used.
 */
export interface Room {
  readonly ours: readonly string[];
  readonly packages?: readonly string[];
  readonly node?: boolean;
}

/** The solver from the ground up: each room may import itself and those named. */
export const TABLE: Readonly<Record<string, Room>> = {
  'solver/problem': { ours: [] },
  'solver/sparse': { ours: [] },
  'solver/mesh': { ours: ['solver/problem'], packages: ['delaunator', '@kninnug/constrainautor'] },
  'solver/fluid': { ours: ['solver/problem'] },
  'solver/section': {
    ours: ['solver/problem', 'solver/sparse', 'solver/mesh', 'solver/fluid'],
  },
  'solver/chip': {
    ours: ['solver/problem', 'solver/mesh', 'solver/section', 'solver/fluid'],
    packages: ['zod', 'flatbush', 'clipper2-ts'],
  },
  'solver/cell': {
    ours: ['solver/problem', 'solver/sparse', 'solver/mesh', 'solver/fluid', 'solver/section', 'solver/chip'],
    packages: ['clipper2-ts', 'flatbush'],
  },
  'solver/network': {
    ours: ['solver/problem', 'solver/sparse', 'solver/fluid', 'solver/section', 'solver/chip', 'solver/cell'],
  },
  'solver/exposure': {
    ours: [
      'solver/problem',
      'solver/mesh',
      'solver/fluid',
      'solver/section',
      'solver/chip',
      'solver/cell',
      'solver/network',
    ],
  },
  'solver/checks': {
    ours: [
      'solver/problem',
      'solver/fluid',
      'solver/section',
      'solver/chip',
      'solver/cell',
      'solver/network',
      'solver/exposure',
    ],
    packages: ['flatbush', 'clipper2-ts'],
  },
  'solver/lump': {
    ours: [
      'solver/problem',
      'solver/fluid',
      'solver/section',
      'solver/chip',
      'solver/cell',
      'solver/network',
    ],
  },
  'solver/spread': {
    ours: [
      'solver/problem',
      'solver/fluid',
      'solver/section',
      'solver/chip',
      'solver/cell',
      'solver/network',
      'solver/lump',
    ],
  },
  'solver/report': {
    ours: [
      'solver/problem',
      'solver/fluid',
      'solver/section',
      'solver/chip',
      'solver/cell',
      'solver/network',
      'solver/exposure',
      'solver/checks',
      'solver/lump',
      'solver/spread',
    ],
  },
  solver: {
    ours: [
      'solver/lump',
      'solver/spread',
      'solver/report',
      'solver/problem',
      'solver/sparse',
      'solver/mesh',
      'solver/fluid',
      'solver/section',
      'solver/chip',
      'solver/cell',
      'solver/network',
      'solver/exposure',
      'solver/checks',
    ],
  },
  // The made chip: stands on the whole solver, and nothing of the solver on it.
  'solver/asbuilt': { ours: ['solver'] },
  db: { ours: ['solver'], packages: ['better-sqlite3', 'zod'], node: true },
  main: {
    ours: ['main', 'db', 'solver'],
    packages: [
      'zod',
      'csv-stringify',
      'csv-parse',
      'pdfkit',
      'bidi-js',
      'saxes',
      'svg-pathdata',
      'clipper2-ts',
      'flatbush',
    ],
    node: true,
  },
  'main/contract': { ours: ['solver'], packages: ['zod'] },
  'main/electron': { ours: ['main', 'db', 'solver'], packages: ['electron', 'zod'], node: true },
  renderer: {
    ours: ['solver', 'main/contract'],
    packages: [
      'react',
      'react-dom',
      'konva',
      'plotly.js-dist-min',
      'flatbush',
      '@fontsource-variable/literata',
      '@fontsource-variable/commissioner',
    ],
  },
};

/** Tests and build settings sit beside the code but may reach for anything. */
export const FREE = /(\.test\.tsx?|vite\.config\.ts)$/;
