import temml from 'temml';

/** What the TeX converter builds, as far as it is used here. */
export interface MathTree {
  readonly type: string;
  readonly text?: string;
  readonly attributes?: Readonly<Record<string, unknown>>;
  readonly children?: readonly MathTree[];
}

/** The package's types describe its CommonJS form: as an ES module the functions are in the default export. */
const converter = temml as unknown as { readonly __renderToMathMLTree: (tex: string, options: temml.Options) => MathTree };

/** Longer TeX is shown as source: nobody reads it as a formula, and the converter is not linear. */
const longest = 4000;

/**
 * TeX as a tree of MathML; null where it is not sound TeX. Nothing is trusted: commands that set classes, ids, styles or links are errors, and
 * macros expand at most a thousand times.
 */
export function mathTree(tex: string, display: boolean): MathTree | null {
  if (tex.length > longest) return null;
  try {
    return converter.__renderToMathMLTree(tex, {
      displayMode: display,
      throwOnError: true,
      trust: false,
      strict: false,
      maxSize: [20, 20],
      maxExpand: 1000,
    });
  } catch {
    // Not sound TeX, whatever way the converter found out (also by exhausting its stack): the caller shows the source.
    return null;
  }
}
