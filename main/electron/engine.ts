/**
 * How the engine of scripts is started in the page and in its threads: with half of the usual room for what is new
 * and soon garbage, 8 MB at a time instead of 16. Page and threads have an engine each, and together they hold some
 * 90 MB less while a chip is edited, at the same speed. And so that page and solving thread can give back at once
 * what a large chip leaves behind (`renderer/solving/tidy.ts`), which the engine does only half a minute later.
 */
export const ENGINE = '--max-semi-space-size=8 --expose-gc';
