import { madeChip } from '../../solver/asbuilt/made.ts';
import { readMeasured } from '../../solver/asbuilt/read-measured.ts';
import { restoreDrives } from '../../solver/asbuilt/restore.ts';
import { sectionOf } from '../../solver/section/section-of.ts';
import { solve } from '../../solver/solve.ts';
import { slopesOf } from '../../solver/spread/slopes.ts';
import { cross, table } from '../asbuilt/chips.ts';
import { verify } from '../verify/row.ts';

const IDEAL = { junctions: 'ideal' } as const;

verify(
  {
    quantity: 'spread: power of resistance with the width of an elliptical channel',
    check: 'exact',
    at: 'axes 1 to 4',
    source: 'K = π a³ b³/(4 (a² + b²)) differentiated: −3 + 2 a²/(a² + b²)',
    tolerance: 2e-4,
  },
  () => {
    const { resistance } = slopesOf({ kind: 'ellipse' }, [4e-4, 4e-4], 1e-4, '');
    return resistance.width / (-3 + 32 / 17) - 1;
  },
);

verify(
  {
    quantity: 'spread: power of peak wall shear at a given flow with the depth of a shallow channel',
    check: 'exact',
    at: 'width over depth 1000',
    source: 'plane Poiseuille flow, τ = 6 µQ/(w h²)',
    tolerance: 2e-3,
  },
  () => {
    const { resistance, shear } = slopesOf({ kind: 'rectangle' }, [0.1, 0.1], 1e-4, '');
    return (resistance.depth + shear.depth) / -2 - 1;
  },
);

verify(
  {
    quantity: 'spread: share of an inlet by the tolerance of its channel’s width',
    check: 'exact',
    at: 'two inlets of plates 1000 by 20 µm at one pressure, one width ± 1 %',
    source:
      's = g1/(g1 + g2) of two like conductances: ds/s = ½ dg/g, with dg/g of the section by differences',
    tolerance: 1e-3,
  },
  () => {
    const chip = cross();
    const told = solve(
      {
        ...chip,
        layers: chip.layers.map(({ tolerance: _, ...layer }) => layer),
        channels: chip.channels.map((one) =>
          one.id === 'a' ? { ...one, tolerance: { width: { share: 0.01 } } } : one,
        ),
      },
      IDEAL,
    );
    const of = (w: number): number => sectionOf({ kind: 'rectangle' }, w, 20e-6).conductance;
    const exact = Math.log(of(1.01e-3) / of(0.99e-3)) / 4;
    return told.ports[0]!.making!.share.worst / exact - 1;
  },
);

verify(
  {
    quantity: 'as built: pressure that restores an inlet’s half of the flow',
    check: 'exact',
    at: 'one of two inlet channels made 10 % wider, both outlets open',
    source:
      'equal flows need drops as the resistances: (b − p)/(a − p) = R_b/R_a by the section’s own conductance',
    tolerance: 1e-4,
  },
  () => {
    const drawn = cross({ targets: [{ port: 'in a', share: 0.5, within: '0.01 %' }] });
    const measured = readMeasured(table('part,what,value,uncertainty\nb,width,1100,0'), drawn);
    const { chip, result } = restoreDrives(madeChip(drawn, measured).chip, IDEAL);
    const [a, b] = chip.ports.map(({ drive }) => (drive.kind === 'pressure' ? drive.pressure : Number.NaN));
    const middle = a! - result.channels[0]!.pieces[0]!.pressureDrop;
    const of = (w: number): number => sectionOf({ kind: 'rectangle' }, w, 20e-6).conductance;
    return (b! - middle) / (a! - middle) / (of(1e-3) / of(1.1e-3)) - 1;
  },
);
