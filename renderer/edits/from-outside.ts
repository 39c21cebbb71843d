/** What reads chips and edits that come as text or data, with all their rules: brought in when first needed. */
export { readDescription } from '../../solver/chip/description.ts';
export { readEdit } from '../../solver/chip/edit-read.ts';
export { paste } from './paste.ts';
export { remedyOf } from './remedy.ts';
