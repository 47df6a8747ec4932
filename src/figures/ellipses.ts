import { roundTo } from '../results/rounding.js';
import type { Results } from '../results/schema.js';
import { horizontalAxis, verticalAxis } from './axes.js';
import type { Shown } from './combinations.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { combinationItems, dashOf, drawKey, quietItem } from './key.js';
import { parameterName, parameterNames, shortLabels } from './labels.js';
import { linearTicks } from './log-ticks.js';
import { lookOf, quiet } from './palette.js';
import { pageWidth } from './panels.js';

/** Largest number of parameters in a triangle; beyond it the correlations serve better. */
const mostParameters = 7;

/** A combination with its covariance of the parameters that are drawn. */
interface Drawn extends Shown {
  readonly covariance: (a: string, b: string) => number | null;
}

/** Margins of a panel: ticks hang into the gap to the left and below. */
const margin = { left: 50, right: 2, top: 4, bottom: 46 };

/** Triangle of 1- and 2-sigma ellipses of the corrected covariances, with one-dimensional curves on the diagonal. */
export function ellipses(results: Results, drawing: Drawing): readonly Figure[] {
  const all = parameterNames(results, 'target');
  const targets = all.slice(0, mostParameters);
  const shown = shownCombinations(results);
  const drawn = shown.filter(({ result }) => result.covariance.corrected !== null).map((one): Drawn => ({ ...one, covariance: covarianceOf(one) }));
  if (targets.length < 2 || drawn.length === 0) return [];
  const missing = shown.filter(({ result }) => result.covariance.corrected === null);
  // The upper right of the triangle is empty: the key goes there where it fits.
  const cell = Math.min(230, Math.floor((pageWidth - margin.left - 4) / targets.length));
  const free = targets.length === 3 ? 1 : 2;
  const keyLeft = margin.left + (free + 0.06) * cell;
  const items = [
    ...combinationItems([...drawn, ...missing], (k) => k < drawn.length),
    quietItem('1 sigma', { line: { width: 2.2 } }),
    quietItem('2 sigma', { line: { width: 1.1 } }),
    quietItem('fiducial', { symbol: { name: 'plus', filled: false } }),
  ];
  const corner = drawKey(drawing, items, pageWidth - keyLeft, true);
  const inCorner = targets.length >= 3 && corner.height < free * cell;
  const key = inCorner ? corner : drawKey(drawing, items);
  const top = inCorner ? 8 : key.height + 14;
  const height = top + Math.max(cell * targets.length, inCorner ? key.height : 0) + margin.bottom;
  const labels = shortLabels(results, cell - 10, 13, false);
  const panels = targets.flatMap((vertical, row) =>
    targets.slice(0, row + 1).map((horizontal, column) => {
      const edges = { left: column === 0, bottom: row === targets.length - 1 };
      const svg = row === column ? curve(results, drawing, drawn, vertical, cell, labels, edges.bottom) : pair(results, drawing, drawn, [horizontal, vertical], cell, labels, edges);
      return { svg, x: column * cell, y: top + row * cell };
    }),
  );
  const svg = compose(drawing, { width: pageWidth, height, panels: [{ svg: key.svg, x: inCorner ? keyLeft : 0, y: 6 }, ...panels] });
  return [finish(svg, wordsOf(results, drawn, missing, targets, all.length - targets.length))];
}

function covarianceOf({ result }: Shown): Drawn['covariance'] {
  return (a, b) => {
    const [i, j] = [result.parameters.indexOf(a), result.parameters.indexOf(b)];
    return i < 0 || j < 0 ? null : (result.covariance.corrected?.[i]?.[j] ?? null);
  };
}

/** Range that shows every 2-sigma ellipse. */
function rangeOf(results: Results, drawn: readonly Drawn[], name: string): { readonly centre: number; readonly domain: [number, number] } {
  const centre = results.parameters.find((parameter) => parameter.name === name)!.fiducial;
  const largest = Math.max(...drawn.map(({ covariance }) => Math.sqrt(covariance(name, name) ?? 0)));
  const half = largest > 0 ? 2.7 * largest : 1;
  return { centre, domain: [centre - half, centre + half] };
}

function frame(cell: number) {
  return {
    width: cell + margin.left,
    height: cell + margin.bottom - 2,
    marginLeft: margin.left,
    marginRight: margin.right + 4,
    marginTop: margin.top,
    marginBottom: margin.bottom,
  };
}

function pair(
  results: Results,
  drawing: Drawing,
  drawn: readonly Drawn[],
  [horizontal, vertical]: readonly [string, string],
  cell: number,
  labels: ReadonlyMap<string, string>,
  edges: { readonly left: boolean; readonly bottom: boolean },
): Element {
  const { document, plot } = drawing;
  const [x, y] = [rangeOf(results, drawn, horizontal), rangeOf(results, drawn, vertical)];
  const none = (): string => '';
  return plot.plot({
    document,
    ...frame(cell),
    x: { domain: x.domain },
    y: { domain: y.domain },
    marks: [
      horizontalAxis(drawing, { ticks: innerTicks(x.domain, cell), label: edges.bottom ? labels.get(horizontal)! : null, ...(edges.bottom ? {} : { format: none }) }),
      verticalAxis(drawing, { ticks: innerTicks(y.domain, cell), label: edges.left ? labels.get(vertical)! : null, isCentred: true, ...(edges.left ? {} : { format: none }) }),
      plot.frame({ stroke: quiet.light, strokeOpacity: 0.5 }),
      ...[...drawn].flatMap((one) => {
        const { colour, dash } = lookOf(one.look);
        return results.rules.ellipses.map(({ sigmas, deltaChiSquare }) =>
          plot.line(outline(one, horizontal, vertical, x.centre, y.centre, deltaChiSquare), {
            x: 'x',
            y: 'y',
            stroke: colour,
            strokeWidth: sigmas === 1 ? 2.2 : 1.1,
            strokeDasharray: dashOf(dash),
            fill: sigmas === 1 ? colour : 'none',
            fillOpacity: 0.08,
          }),
        );
      }),
      plot.dot([[x.centre, y.centre]], { symbol: 'plus', r: 4.5, stroke: 'currentColor', strokeWidth: 1.4 }),
    ],
  });
}

/** Ticks that stay clear of the corners, where those of the next panel begin. */
function innerTicks(domain: readonly [number, number], cell: number): readonly number[] {
  const room = 0.07 * (domain[1] - domain[0]);
  return linearTicks(domain[0] + room, domain[1] - room, cell > 150 ? 4 : 3);
}

/** Points of the ellipse (x - c)^T C^-1 (x - c) = delta chi^2. */
export function outline({ covariance }: Pick<Drawn, 'covariance'>, a: string, b: string, centreA: number, centreB: number, deltaChiSquare: number) {
  const [aa, bb, ab] = [covariance(a, a), covariance(b, b), covariance(a, b)];
  if (aa === null || bb === null || ab === null) return [];
  // Cholesky factor of the 2 x 2 covariance: the unit circle goes to the ellipse.
  const first = Math.sqrt(aa);
  const second = ab / first;
  const third = Math.sqrt(Math.max(0, bb - second * second));
  const radius = Math.sqrt(deltaChiSquare);
  return Array.from({ length: 73 }, (_, k) => {
    const angle = (2 * Math.PI * k) / 72;
    const [u, v] = [radius * Math.cos(angle), radius * Math.sin(angle)];
    return { x: centreA + first * u, y: centreB + second * u + third * v };
  });
}

function curve(results: Results, drawing: Drawing, drawn: readonly Drawn[], name: string, cell: number, labels: ReadonlyMap<string, string>, bottom: boolean): Element {
  const { document, plot } = drawing;
  const { centre, domain } = rangeOf(results, drawn, name);
  return plot.plot({
    document,
    ...frame(cell),
    x: { domain },
    y: { domain: [0, 1.08], axis: null },
    marks: [
      horizontalAxis(drawing, { ticks: innerTicks(domain, cell), label: bottom ? labels.get(name)! : null, ...(bottom ? {} : { format: () => '' }) }),
      plot.ruleY([0], { stroke: quiet.light, strokeOpacity: 0.5 }),
      ...drawn.flatMap((one) => {
        const { colour, dash } = lookOf(one.look);
        const variance = one.covariance(name, name);
        if (variance === null) return [];
        const points = Array.from({ length: 81 }, (_, k) => {
          const x = domain[0] + ((domain[1] - domain[0]) * k) / 80;
          return { x, y: Math.exp(-((x - centre) ** 2) / (2 * variance)) };
        });
        return [plot.line(points, { x: 'x', y: 'y', stroke: colour, strokeWidth: 1.9, strokeDasharray: dashOf(dash) })];
      }),
    ],
  });
}

function wordsOf(results: Results, drawn: readonly Drawn[], missing: readonly Shown[], targets: readonly string[], left: number) {
  return {
    name: 'ellipses',
    title: 'Joint errors of pairs of parameters',
    alternative: describe(results, drawn, targets),
    caption:
      'Joint 1- and 2-sigma regions (68.3 % and 95.4 % of two parameters), corrected and marginalised over the rest; the cross is the fiducial point. Ellipses that turn, not only shrink, are degeneracies that break.' +
      (left > 0 ? ` The first ${String(targets.length)} target parameters; ${String(left)} more are in the correlations.` : '') +
      (missing.length > 0 ? ` Cannot be drawn, as there is no corrected covariance: ${missing.map(({ label }) => label).join(', ')}.` : ''),
  };
}

function describe(results: Results, drawn: readonly Drawn[], targets: readonly string[]): string {
  return targets
    .flatMap((vertical, row) =>
      targets.slice(0, row).map((horizontal) => {
        const values = drawn.map(({ label, covariance }) => {
          const [aa, bb, ab] = [covariance(vertical, vertical), covariance(horizontal, horizontal), covariance(vertical, horizontal)];
          return aa === null || bb === null || ab === null ? `${label} none` : `${label} ${roundTo(ab / Math.sqrt(aa * bb), 0.01)}`;
        });
        return `Correlation of ${parameterName(results, vertical)} with ${parameterName(results, horizontal)}: ${values.join(', ')}.`;
      }),
    )
    .join(' ');
}
