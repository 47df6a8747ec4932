import type { Markish } from '@observablehq/plot';
import type { Results, ScanResult } from '../results/schema.js';
import { horizontalAxis, verticalAxis } from './axes.js';
import { isLogarithmic } from './coordinate.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import type { KeyItem } from './key.js';
import { combinationItems, dashOf, drawKey, quietItem } from './key.js';
import { axisLabel, parameterName, parameterNames, shortLabels } from './labels.js';
import { linearTicks, logTicks } from './log-ticks.js';
import { lookOf, quiet } from './palette.js';
import { gridFor, gridHeight, pageWidth, placed, tick } from './panels.js';

/** One value along the scan. */
interface Point {
  readonly at: number;
  readonly value: number;
  readonly low: number;
  readonly high: number;
}

interface Line {
  readonly label: string;
  readonly look: number;
  readonly scan: ScanResult;
}

type Values = ScanResult['errors'][string]['fixed'];

/** Most panels of one figure. */
const mostPanels = 12;

/** Errors, and the gain, against the cut. */
export function scan(results: Results, drawing: Drawing): readonly Figure[] {
  const names = Object.keys(results.combinations);
  const lines = Object.entries(results.scan).map(([name, one]) => ({
    label: results.combinations[name]?.label ?? name,
    look: names.indexOf(name),
    scan: one,
  }));
  if (lines.length === 0 || parameterNames(results, 'target').length === 0) return [];
  const gainLines = lines.filter((line) => line.scan.improvements !== null);
  return [errorFigure(results, drawing, lines), ...(gainLines.length === 0 ? [] : [gainFigure(results, drawing, gainLines)])];
}

/** Corrected values with their 68 % interval; cuts for which the data cannot tell are left out, and so gaps. */
export function scanPoints(scanned: ScanResult, values: Values): readonly (Point | { readonly at: number; readonly value: null })[] {
  return scanned.at.map((at, k) => {
    const value = values.corrected[k] ?? null;
    if (value === null) return { at, value };
    const spread = Math.exp(values.relativeStandardError[k] ?? 0);
    return { at, value, low: value / spread, high: value * spread };
  });
}

function known(points: ReturnType<typeof scanPoints>): readonly Point[] {
  return points.filter((point): point is Point => point.value !== null);
}

function rawPoints({ at }: ScanResult, { raw }: Values) {
  return at.map((cut, k) => ({ at: cut, value: raw[k] ?? null }));
}

function frame(results: Results, drawing: Drawing, items: readonly KeyItem[], draw: (parameter: string, label: string, width: number, height: number) => Element) {
  const parameters = parameterNames(results, 'target').slice(0, mostPanels);
  const key = drawKey(drawing, items);
  const grid = gridFor(parameters.length, 244, key.height + 16, 3);
  const labels = shortLabels(results, grid.width - 110, 13, true);
  const svgs = parameters.map((parameter) => draw(parameter, labels.get(parameter)!, grid.width, grid.height));
  const panels = [{ svg: key.svg, x: 0, y: 6 }, ...placed(grid, svgs)];
  return compose(drawing, { width: pageWidth, height: gridHeight(grid, svgs.length), panels });
}

/** What is not a target, or beyond the most panels. */
function leftOut(results: Results): string {
  const left = results.parameters.length - Math.min(mostPanels, parameterNames(results, 'target').length);
  return left === 0 ? '' : ` Target parameters only; the table has the ${left === 1 ? 'other one' : `other ${String(left)}`}.`;
}

/** Axes, a title, and the range of the values. */
function axes(drawing: Drawing, { scan: first }: Line, title: string, values: readonly number[], width: number, height: number) {
  const domain: [number, number] = values.length === 0 ? [0.5, 2] : [Math.min(...values) / 1.06, Math.max(...values) * 1.06];
  const ends: [number, number] = [Math.min(...first.at), Math.max(...first.at)];
  const along: [number, number] = ends[0] < ends[1] ? ends : [ends[0] - 1, ends[1] + 1];
  const isLog = isLogarithmic(first.at) || (ends[0] > 0 && ends[1] / ends[0] > 5);
  const label = `${first.keep === 'below' ? 'largest' : 'smallest'} ${axisLabel(first.coordinate, first.unit)} kept`;
  return {
    options: {
      width,
      height,
      marginLeft: 52,
      marginRight: 20,
      marginTop: 34,
      marginBottom: 46,
      x: { type: isLog ? ('log' as const) : ('linear' as const), domain: along },
      y: { type: 'log' as const, domain },
    },
    marks: [
      horizontalAxis(drawing, { ticks: isLog ? logTicks(along, 5) : linearTicks(...along, 5), label }),
      verticalAxis(drawing, { ticks: logTicks(domain, 6), label: null }),
      drawing.plot.text([title], { frameAnchor: 'top', dx: -16, dy: -18, fontWeight: 'bold', fontSize: 13 }),
    ] as Markish[],
  };
}

function errorFigure(results: Results, drawing: Drawing, lines: readonly Line[]): Figure {
  const targets = parameterNames(results, 'target');
  const isKnown = (k: number): boolean => targets.some((name) => known(scanPoints(lines[k]!.scan, lines[k]!.scan.errors[name]!.marginalised)).length > 0);
  const items = [
    ...combinationItems(lines, isKnown).map((item, k) => ({ ...item, sample: { ...item.sample, line: { width: isKnown(k) ? 2 : 0.8 } } })),
    quietItem('marginalised', { line: { width: 2 } }),
    quietItem('fixed', { line: { width: 1.3, dash: '5 3' } }),
    quietItem('marginalised, raw', { line: { width: 0.8 } }),
  ];
  const svg = frame(results, drawing, items, (parameter, label, width, height) => {
    const drawn = lines.map(({ look, scan: one }) => ({
      look,
      marginalised: scanPoints(one, one.errors[parameter]!.marginalised),
      fixed: scanPoints(one, one.errors[parameter]!.fixed),
      raw: rawPoints(one, one.errors[parameter]!.marginalised),
    }));
    const values = drawn.flatMap(({ marginalised, fixed, raw }) => [...marginalised, ...fixed, ...raw].map(({ value }) => value)).filter((value) => value !== null);
    const { options, marks } = axes(drawing, lines[0]!, `error of ${label}`, values, width, height);
    return drawing.plot.plot({ document: drawing.document, ...options, marks: [...marks, ...drawn.flatMap((one) => errorCurves(drawing, one))] });
  });
  return finish(svg, {
    name: 'scan-errors',
    title: 'Errors against the scale cut',
    alternative: endpoints(results, lines, 'errors'),
    caption:
      'Corrected errors against the scale cut: solid marginalised, dashed fixed; thin lines are raw. Where a curve still falls at its end, the error rests on the last scales that are kept, and so on how well they are modelled. Gaps are cuts for which the data cannot tell.' +
      leftOut(results),
  });
}

interface Curves {
  readonly look: number;
  readonly marginalised: ReturnType<typeof scanPoints>;
  readonly fixed: ReturnType<typeof scanPoints>;
  readonly raw: ReturnType<typeof rawPoints>;
}

function errorCurves({ plot }: Drawing, { look, marginalised, fixed, raw }: Curves): readonly Markish[] {
  const { colour, symbol } = lookOf(look);
  return [
    plot.line(raw, { x: 'at', y: 'value', stroke: colour, strokeWidth: 0.8, strokeOpacity: 0.7 }),
    plot.line(fixed, { x: 'at', y: 'value', stroke: colour, strokeDasharray: '5 3', strokeWidth: 1.3 }),
    plot.line(marginalised, { x: 'at', y: 'value', stroke: colour, strokeWidth: 2 }),
    plot.dot(known(marginalised), { x: 'at', y: 'value', fill: colour, stroke: 'none', symbol, r: 3.4 }),
  ];
}

function gainFigure(results: Results, drawing: Drawing, lines: readonly Line[]): Figure {
  const { document, plot } = drawing;
  const targets = parameterNames(results, 'target');
  const isKnown = (k: number): boolean => targets.some((name) => known(scanPoints(lines[k]!.scan, lines[k]!.scan.improvements![name]!.marginalised)).length > 0);
  const items = [...combinationItems(lines, isKnown), quietItem('68 %', { band: true })];
  const svg = frame(results, drawing, items, (parameter, label, width, height) => {
    const drawn = lines.map((line) => ({ ...line, gain: scanPoints(line.scan, line.scan.improvements![parameter]!.marginalised) }));
    const values = drawn.flatMap(({ gain }) => known(gain).flatMap(({ low, high }) => [low, high]));
    const { options, marks } = axes(drawing, lines[0]!, `gain in ${label}`, [0.97, 1.1, ...values], width, height);
    const curves = drawn.flatMap(({ look, gain }) => {
      const { colour, symbol, dash } = lookOf(look);
      return [
        plot.areaY(gain, { x: 'at', y1: (point: Partial<Point>) => point.low ?? Number.NaN, y2: (point: Partial<Point>) => point.high ?? Number.NaN, fill: colour, fillOpacity: 0.15 }),
        plot.line(gain, { x: 'at', y: 'value', stroke: colour, strokeWidth: 2, strokeDasharray: dashOf(dash) }),
        plot.dot(known(gain), { x: 'at', y: 'value', fill: colour, stroke: 'none', symbol, r: 3.4 }),
      ];
    });
    return plot.plot({ document, ...options, marks: [...marks, plot.ruleY([1], { stroke: quiet.light, strokeWidth: 1.2 }), ...curves] });
  });
  return finish(svg, {
    name: 'scan-gains',
    title: 'Gain against the scale cut',
    alternative: endpoints(results, lines, 'improvements'),
    caption:
      'Corrected marginalised gain over the baseline at the same cut, with its 68 % band; the line at 1 is no gain. A gain that grows as scales are cut away comes from making up for what the baseline lost; one that lives at the last scales only is as safe as their modelling.' +
      leftOut(results),
  });
}

function endpoints(results: Results, lines: readonly Line[], which: 'errors' | 'improvements'): string {
  const sentences = parameterNames(results, 'target').map((parameter) => {
    const values = lines.map(({ label, scan: one }) => {
      const found = known(scanPoints(one, one[which]![parameter]!.marginalised));
      const [first, last] = [found[0], found[found.length - 1]];
      if (first === undefined || last === undefined) return `${label} cannot tell`;
      return `${label} ${first.value.toPrecision(2)} at ${tick(first.at)} to ${last.value.toPrecision(2)} at ${tick(last.at)}`;
    });
    return `${which === 'errors' ? 'Error of' : 'Gain in'} ${parameterName(results, parameter)}: ${values.join('; ')}.`;
  });
  return sentences.join(' ');
}
