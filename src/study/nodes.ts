import type { ArrayReference } from '../arrays/reference.js';
import { readRealisations } from './array-shapes.js';
import type { Problem } from './problems.js';
import type { RunContext } from './run-context.js';
import { noneOf } from './run-context.js';
import type { NodeFile } from './schema.js';
import { readSeeds } from './seeds.js';
import type { EnsembleDerivative, Node, Parameter, Realisations } from './study.js';

/** Two values closer than this, relative to their size, are one value that was written or computed twice. */
const sameValue = 1e-12;

const equal = (a: number, b: number): boolean => Math.abs(a - b) <= sameValue * Math.max(Math.abs(a), Math.abs(b));

/**
 * Simulations at two or more values of a parameter. A node's own seeds override those of the derivative. Where no node has
 * seeds, rows are matched by index, and so their numbers must agree.
 */
export function readNodes(
  given: readonly NodeFile[],
  seeds: ArrayReference | undefined,
  parameter: Parameter,
  fiducial: Realisations | null,
  context: RunContext,
): EnsembleDerivative | null {
  const { reading, place } = context;
  const path = ['derivatives', parameter.name, 'nodes'];
  const problems = valueProblems(given, parameter, context);
  problems.forEach(reading.report);
  const nodes = given.map((node, i) => readNode(node, i, seeds, parameter.name, context));
  if (problems.length > 0 || fiducial === null || nodes.some((node) => node === null)) return null;
  const read = nodes.filter((node) => node !== null);
  const fault = matchingFault(read, fiducial);
  if (fault === null) return { kind: 'nodes', nodes: read };
  reading.report({ ...fault, where: place([...path, fault.node]) });
  return null;
}

/** What can be said before any array is opened. */
function valueProblems(given: readonly NodeFile[], parameter: Parameter, { place }: RunContext): readonly Problem[] {
  const path = ['derivatives', parameter.name, 'nodes'];
  const problems: Problem[] = [];
  if (given.length < 2) {
    problems.push({
      what: 'a derivative has too few nodes',
      where: place(path),
      found: `${String(given.length)} ${given.length === 1 ? 'node' : 'nodes'}`,
      expected: 'at least 2, at different values of the parameter',
      remedy: 'add a node; one of them may be the fiducial: {at: …, values: fiducial}',
    });
  }
  given.forEach((node, i) => {
    const first = given.findIndex((other) => equal(other.at, node.at));
    if (first !== i) {
      problems.push({
        what: 'two nodes stand at one value',
        where: place([...path, i, 'at']),
        found: `${String(node.at)} at nodes ${String(first)} and ${String(i)} (counted from 0)`,
        expected: 'a different value of the parameter at each node',
        remedy: 'correct at: of one of them, or join their rows into one file',
      });
    }
    if (node.values === 'fiducial' && !equal(node.at, parameter.fiducial)) {
      problems.push({
        what: 'the fiducial rows stand at another value',
        where: place([...path, i, 'at']),
        found: String(node.at),
        expected: `${String(parameter.fiducial)}, the fiducial value of ${parameter.name}`,
        remedy: 'correct at:, or name the file that holds the rows at this value',
      });
    }
  });
  return problems;
}

function readNode(node: NodeFile, index: number, shared: ArrayReference | undefined, parameter: string, context: RunContext): Node | null {
  const { reading, folder, place, columns } = context;
  const path = ['derivatives', parameter, 'nodes', index];
  if (node.values === 'fiducial') {
    noneOf(node, ['seeds'], 'values: fiducial', path, context);
    return { at: node.at, realisations: 'fiducial' };
  }
  const rows = readRealisations(reading, folder, node.values, columns.length, place([...path, 'values']));
  if (rows === null) return null;
  const reference = node.seeds ?? shared;
  if (reference === undefined) return { at: node.at, realisations: { ...rows, seeds: null } };
  const where = node.seeds === undefined ? place(['derivatives', parameter, 'seeds']) : place([...path, 'seeds']);
  const seeds = readSeeds(reading, folder, reference, rows.rows.rows, rows.source, where);
  return seeds === null ? null : { at: node.at, realisations: { ...rows, seeds } };
}

type Fault = Omit<Problem, 'where'> & { readonly node: number };

/** Whether the rows of the nodes can be matched with each other, and with the fiducial where it is a node. */
function matchingFault(nodes: readonly Node[], fiducial: Realisations): Fault | null {
  const own = nodes.flatMap(({ realisations }, node) => (realisations === 'fiducial' ? [] : [{ ...realisations, node }]));
  const [first, ...others] = own;
  if (first === undefined) return null;
  const odd = others.find(({ seeds, rows }) => (seeds === null) !== (first.seeds === null) || (seeds === null && rows.rows !== first.rows.rows));
  if (odd !== undefined) return stepFault(first, odd, odd.node);
  const node = nodes.findIndex(({ realisations }) => realisations === 'fiducial');
  return node === -1 ? null : fiducialFault(own, fiducial, node);
}

function rowsText({ rows, source, seeds }: Realisations): string {
  return `${String(rows.rows)} rows in ${source}${seeds === null ? '' : ' with seeds'}`;
}

function stepFault(first: Realisations, odd: Realisations, node: number): Fault {
  const seeded = first.seeds !== null || odd.seeds !== null;
  return {
    what: 'a step does not match its files',
    node,
    found: seeded ? `${rowsText(first)}, ${rowsText(odd)}${odd.seeds === null ? ' without' : ''}` : `${rowsText(first)}, ${String(odd.rows.rows)} in ${odd.source}`,
    expected: 'the same realisations at every node, or a seeds file for each',
    remedy: seeded ? 'add seeds: to the node that has none' : 'add seeds: to both nodes',
  };
}

function fiducialFault(own: readonly Realisations[], fiducial: Realisations, node: number): Fault | null {
  const [first] = own;
  if (first === undefined) return null;
  const fault = { what: 'the fiducial rows cannot be matched with the other nodes', node };
  if ((first.seeds === null) !== (fiducial.seeds === null)) {
    const without = fiducial.seeds === null;
    return {
      ...fault,
      found: without ? 'seeds at the other nodes, none under fiducial:' : 'seeds under fiducial:, none at the other nodes',
      expected: 'seeds for both, or for neither',
      remedy: without ? 'add seeds: under fiducial:' : 'add seeds: to this derivative',
    };
  }
  if (first.seeds === null || fiducial.seeds === null) {
    if (fiducial.rows.rows >= first.rows.rows) return null;
    return {
      ...fault,
      found: `${rowsText(fiducial)}, ${String(first.rows.rows)} in ${first.source}`,
      expected: 'at least as many fiducial rows, in the same order',
      remedy: 'add seeds: to this derivative and under fiducial:',
    };
  }
  const sets = own.map(({ seeds }) => new Set(Array.from(seeds ?? [])));
  const common = Array.from(fiducial.seeds).filter((seed) => sets.every((set) => set.has(seed))).length;
  if (common >= 2) return null;
  return {
    ...fault,
    found: `${String(common)} ${common === 1 ? 'seed' : 'seeds'} in common`,
    expected: 'at least 2 seeds that the fiducial rows and every other node share',
    remedy: 'check that the seeds files name the same simulations, or leave the fiducial node out',
  };
}
