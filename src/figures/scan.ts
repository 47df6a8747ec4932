import type { Results, ScanResult } from '../results/schema.js';
import { verticalAxis } from './axes.js';
import type { Drawing } from './drawing.js';
import { compose, finish } from './drawing.js';
import type { Figure } from './figure.js';
import { axisLabel, parameterLabel, parameterName, parameterNames } from './labels.js';
import { logTicks } from './log-ticks.js';
import { lookOf, quiet } from './palette.js';
import { combinationKey, gridFor, gridHeight, keyHeight, pageWidth, placed, tick } from './panels.js';

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

/** Errors, and the gain, against the cut. */
export function scan(results: Results, drawing: Drawing): readonly Figure[] {
  const names = Object.keys(results.combinations);
  const lines = Object.entries(results.scan).map(([name, one]) => ({
    label: results.combinations[name]?.label ?? name,
    look: names.indexOf(name),
    scan: one,
  }));
  if (lines.length === 0) return [];
  const gainLines = lines.filter((line) => line.scan.improvements !== null);
  return [errorFigure(results, drawing, lines), ...(gainLines.length === 0 ? [] : [gainFigure(results, drawing, gainLines)])];
}

function points(scanned: ScanResult, values: ScanResult['errors'][string]['fixed']): readonly Point[] {
  return scanned.at.flatMap((at, k) => {
    const value = values.corrected[k] ?? null;
    const error = values.relativeStandardError[k] ?? null;
    if (value === null) return [];
    const spread = Math.exp(error ?? 0);
    return [{ at, value, low: value / spread, high: value * spread }];
  });
}

function frame(results: Results, drawing: Drawing, lines: readonly Line[], draw: (parameter: string, width: number, height: number) => Element) {
  const parameters = parameterNames(results, 'target');
  const notes = combinationKey(lines);
  const grid = gridFor(parameters.length, 250, keyHeight(notes), 3);
  const svgs = parameters.map((parameter) => draw(parameter, grid.width, grid.height));
  return compose(drawing, { width: pageWidth, height: gridHeight(grid, svgs.length), panels: placed(grid, svgs), notes });
}

function axes(lines: readonly Line[], values: readonly number[], width: number, height: number) {
  const { scan: first } = lines[0]!;
  const domain: [number, number] = [Math.min(...values) / 1.1, Math.max(...values) * 1.1];
  return {
    domain,
    width,
    height,
    marginLeft: 52,
    marginRight: 12,
    marginTop: 30,
    marginBottom: 46,
    x: { label: `${first.keep === 'below' ? 'largest' : 'smallest'} ${axisLabel(first.coordinate, first.unit)} kept`, labelAnchor: 'center' as const, labelArrow: 'none' as const, ticks: 4, tickFormat: tick },
    y: { type: 'log' as const, domain },
  };
}

function errorFigure(results: Results, drawing: Drawing, lines: readonly Line[]): Figure {
  const { document, plot } = drawing;
  const svg = frame(results, drawing, lines, (parameter, width, height) => {
    const drawn = lines.map((line) => ({
      ...line,
      marginalised: points(line.scan, line.scan.errors[parameter]!.marginalised),
      fixed: points(line.scan, line.scan.errors[parameter]!.fixed),
    }));
    const values = drawn.flatMap(({ marginalised, fixed }) => [...marginalised, ...fixed].map(({ value }) => value));
    const label = `error of ${parameterLabel(results, parameter)}`;
    const { domain, ...options } = axes(lines, values.length === 0 ? [1] : values, width, height);
    const curves = drawn.flatMap(({ look, marginalised, fixed }) => {
        const { colour, symbol } = lookOf(look);
        return [
          plot.line(fixed, { x: 'at', y: 'value', stroke: colour, strokeDasharray: '5 3', strokeWidth: 1.2 }),
          plot.line(marginalised, { x: 'at', y: 'value', stroke: colour, strokeWidth: 2 }),
          plot.dot(marginalised, { x: 'at', y: 'value', fill: colour, stroke: 'none', symbol, r: 3.2 }),
        ];
    });
    return plot.plot({ document, ...options, marks: [verticalAxis(drawing, { ticks: logTicks(domain, 7), label }), ...curves] });
  });
  return finish(svg, {
    name: 'scan-errors',
    title: 'Errors against the scale cut',
    alternative: endpoints(results, lines, 'errors'),
    caption:
      'Corrected errors against the scale cut: solid marginalised, dashed fixed. Where a curve still falls at its end, the error rests on the last scales that are kept, and so on how well they are modelled. Gaps are cuts for which the data cannot tell.',
  });
}

function gainFigure(results: Results, drawing: Drawing, lines: readonly Line[]): Figure {
  const { document, plot } = drawing;
  const svg = frame(results, drawing, lines, (parameter, width, height) => {
    const drawn = lines.map((line) => ({ ...line, gain: points(line.scan, line.scan.improvements![parameter]!.marginalised) }));
    const values = drawn.flatMap(({ gain }) => gain.flatMap(({ low, high }) => [low, high]));
    const { domain, ...options } = axes(lines, [1, ...values], width, height);
    return plot.plot({
      document,
      ...options,
      marks: [
        verticalAxis(drawing, { ticks: logTicks(domain, 7), label: `gain in ${parameterLabel(results, parameter)}` }),
        plot.ruleY([1], { stroke: quiet.light, strokeDasharray: '4 3' }),
        ...drawn.flatMap(({ look, gain }) => {
          const { colour, symbol } = lookOf(look);
          return [
            plot.areaY(gain, { x: 'at', y1: 'low', y2: 'high', fill: colour, fillOpacity: 0.15 }),
            plot.line(gain, { x: 'at', y: 'value', stroke: colour, strokeWidth: 2 }),
            plot.dot(gain, { x: 'at', y: 'value', fill: colour, stroke: 'none', symbol, r: 3.2 }),
          ];
        }),
      ],
    });
  });
  return finish(svg, {
    name: 'scan-gains',
    title: 'Gain against the scale cut',
    alternative: endpoints(results, lines, 'improvements'),
    caption:
      'Corrected marginalised gain over the baseline at the same cut, with its 68 % band. A gain that grows as scales are cut away comes from making up for what the baseline lost; one that lives at the last scales only is as safe as their modelling.',
  });
}

function endpoints(results: Results, lines: readonly Line[], which: 'errors' | 'improvements'): string {
  const sentences = parameterNames(results, 'target').map((parameter) => {
    const values = lines.map(({ label, scan: one }) => {
      const found = points(one, one[which]![parameter]!.marginalised);
      const [first, last] = [found[0], found[found.length - 1]];
      if (first === undefined || last === undefined) return `${label} cannot tell`;
      return `${label} ${first.value.toPrecision(2)} at ${tick(first.at)} to ${last.value.toPrecision(2)} at ${tick(last.at)}`;
    });
    return `${which === 'errors' ? 'Error of' : 'Gain in'} ${parameterName(results, parameter)}: ${values.join('; ')}.`;
  });
  return sentences.join(' ');
}
