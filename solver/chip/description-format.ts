/** What a description begins with: its format, and the version of the format that this program reads. */
export const FORMAT = 'channelwright-chip';
export const VERSION = 1;
