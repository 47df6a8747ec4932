/** A chain of keys and indices that leads to a value of a YAML file. */
export type KeyPath = readonly (string | number)[];

/** `derivatives.omega_m.nodes[1]` */
export function keyPathText(path: KeyPath): string {
  return path.map((step, i) => (typeof step === 'number' ? `[${String(step)}]` : i === 0 ? step : `.${step}`)).join('');
}
