import './kept.js';

await import('./start.ts');
