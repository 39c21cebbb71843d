import type { Chip, Limit } from '../../solver/chip/chip.ts';
import { ChoiceField } from '../card/text-field.tsx';

/** A list to choose from ends somewhere; what it leaves out can be set in the description. */
const MOST = 400;
const MOST_ROUTES = 60;
const ROUTE = 'route ';

/** Where a limit holds: the whole chip, a part, a layer, or a route from port to port. */
export function LimitPlaceField({
  limit,
  chip,
  onLimit,
}: {
  readonly limit: Limit;
  readonly chip: Chip;
  readonly onLimit: (limit: Limit) => string | null;
}) {
  const ends = chip.ports.filter((port) => port.drive.kind !== 'closed');
  const routes: (readonly [string, string])[] = [];
  for (const from of ends)
    for (const to of ends)
      if (
        from !== to &&
        routes.length < MOST_ROUTES &&
        (from.drive.kind === 'flow' || to.drive.kind !== 'flow')
      )
        routes.push([from.id, to.id]);
  const named = typeof limit.where === 'object' ? limit.where : null;
  if (named && !routes.some(([from, to]) => from === named[0] && to === named[1])) routes.unshift(named);
  const choices: (readonly [string, string])[] = [
    ['', 'the whole chip'],
    ...(chip.layers.length > 1 ? chip.layers.map(({ id }) => [id, `layer ${id}`] as const) : []),
    ...chip.chambers.slice(0, MOST).map(({ id }) => [id, id] as const),
    ...chip.channels.slice(0, MOST).map(({ id }) => [id, id] as const),
    ...routes.map(
      ([from, to]) => [`${ROUTE}${JSON.stringify([from, to])}`, `from ${from} to ${to}`] as const,
    ),
  ];
  const value = named ? `${ROUTE}${JSON.stringify(named)}` : ((limit.where as string | undefined) ?? '');
  if (!choices.some(([choice]) => choice === value)) choices.push([value, value]);
  return (
    <ChoiceField
      label="Holds in"
      value={value}
      choices={choices}
      onAccept={(next) => {
        const { where: _, ...rest } = limit;
        if (next === '') return onLimit(rest as Limit);
        const where = next.startsWith(ROUTE)
          ? (JSON.parse(next.slice(ROUTE.length)) as [string, string])
          : next;
        return onLimit({ ...rest, where } as Limit);
      }}
    />
  );
}
