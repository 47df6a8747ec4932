import type { Results } from '../results/schema.js';
import { roundTo } from '../results/rounding.js';
import type { Shown } from './combinations.js';
import { shownCombinations } from './combinations.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { parameterLabel, parameterName, parameterNames } from './labels.js';
import { lookOf, quiet } from './palette.js';
import { combinationKey, keyHeight, pageWidth, tick } from './panels.js';

/** Largest number of parameters in a triangle; beyond it the correlations serve better. */
const mostParameters = 7;

/** A combination with its covariance of the parameters that are drawn. */
interface Drawn extends Shown {
  readonly covariance: (a: string, b: string) => number | null;
}

/** Triangle of 1- and 2-sigma ellipses of the corrected covariances, with one-dimensional curves on the diagonal. */
export function ellipses(results: Results, drawing: Drawing): readonly Figure[] {
  const targets = parameterNames(results, 'target').slice(0, mostParameters);
  const shown = shownCombinations(results).filter(({ result }) => result.covariance.corrected !== null);
  if (targets.length < 2 || shown.length === 0) return [];
  const drawn = shown.map((one) => ({ ...one, covariance: covarianceOf(one) }));
  const notes = combinationKey(drawn);
  const top = keyHeight(notes);
  const left = 46;
  const cell = Math.floor((pageWidth - left) / targets.length);
  const height = top + cell * targets.length + 46;
  const panels = targets.flatMap((vertical, row) =>
    targets.slice(0, row + 1).map((horizontal, column) => ({
      svg:
        row === column
          ? curve(results, drawing, drawn, vertical, cell, row === targets.length - 1)
          : pair(results, drawing, drawn, horizontal, vertical, cell, { left: column === 0, bottom: row === targets.length - 1 }),
      x: left + column * cell - left,
      y: top + row * cell,
    })),
  );
  const svg = compose(drawing, { width: pageWidth, height, panels, notes });
  const missing = shownCombinations(results).filter(({ result }) => result.covariance.corrected === null);
  return [
    finish(svg, {
      name: 'ellipses',
      title: 'Joint errors of pairs of parameters',
      alternative: describe(results, drawn, targets),
      caption: `Joint 1- and 2-sigma regions (68.3 % and 95.4 % of two parameters), corrected and marginalised over the rest; the cross is the fiducial point. Ellipses that turn, not only shrink, are degeneracies that break.${missing.length > 0 ? ` Cannot be drawn, as the corrected matrix has no inverse: ${missing.map(({ label }) => label).join(', ')}.` : ''}`,
    }),
  ];
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
  return { centre, domain: [centre - 2.9 * largest, centre + 2.9 * largest] };
}

function frame(cell: number) {
  return { width: cell + 46, height: cell + 44, marginLeft: 52, marginRight: 4, marginTop: 6, marginBottom: 46 };
}

function pair(
  results: Results,
  { document, plot }: Drawing,
  drawn: readonly Drawn[],
  horizontal: string,
  vertical: string,
  cell: number,
  edges: { readonly left: boolean; readonly bottom: boolean },
): Element {
  const [x, y] = [rangeOf(results, drawn, horizontal), rangeOf(results, drawn, vertical)];
  return plot.plot({
    document,
    ...frame(cell),
    x: { domain: x.domain, label: edges.bottom ? parameterLabel(results, horizontal) : null, labelAnchor: 'center', labelArrow: 'none', ticks: 3, tickFormat: edges.bottom ? tick : () => '' },
    y: { domain: y.domain, label: edges.left ? parameterLabel(results, vertical) : null, labelAnchor: 'center', labelArrow: 'none', ticks: 3, tickFormat: edges.left ? tick : () => '' },
    marks: [
      plot.frame({ stroke: quiet.light, strokeOpacity: 0.4 }),
      ...drawn.flatMap((one) => {
        const { colour, dash } = lookOf(one.look);
        return results.rules.ellipses.map(({ sigmas, deltaChiSquare }) =>
          plot.line(outline(one, horizontal, vertical, x.centre, y.centre, deltaChiSquare), {
            x: 'x',
            y: 'y',
            stroke: colour,
            strokeWidth: sigmas === 1 ? 2 : 1.1,
            strokeDasharray: dash === '' ? 'none' : dash,
            fill: sigmas === 1 ? colour : 'none',
            fillOpacity: 0.1,
          }),
        );
      }),
      plot.dot([[x.centre, y.centre]], { symbol: 'plus', r: 5, stroke: 'currentColor' }),
    ],
  });
}

/** Points of the ellipse (x - c)^T C^-1 (x - c) = delta chi^2. */
function outline({ covariance }: Drawn, a: string, b: string, centreA: number, centreB: number, deltaChiSquare: number) {
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

function curve(results: Results, { document, plot }: Drawing, drawn: readonly Drawn[], name: string, cell: number, bottom: boolean): Element {
  const { centre, domain } = rangeOf(results, drawn, name);
  return plot.plot({
    document,
    ...frame(cell),
    x: { domain, label: bottom ? parameterLabel(results, name) : null, labelAnchor: 'center', labelArrow: 'none', ticks: 3, tickFormat: bottom ? tick : () => '' },
    y: { domain: [0, 1.08], axis: null },
    marks: [
      plot.ruleY([0], { stroke: quiet.light, strokeOpacity: 0.4 }),
      ...drawn.map((one) => {
        const { colour, dash } = lookOf(one.look);
        const variance = one.covariance(name, name) ?? 0;
        const points = Array.from({ length: 81 }, (_, k) => {
          const x = domain[0] + ((domain[1] - domain[0]) * k) / 80;
          return { x, y: Math.exp(-((x - centre) ** 2) / (2 * variance)) };
        });
        return plot.line(points, { x: 'x', y: 'y', stroke: colour, strokeWidth: 1.8, strokeDasharray: dash === '' ? 'none' : dash });
      }),
    ],
  });
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
