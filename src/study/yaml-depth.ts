// Far more than a study needs, and far less than what the parser cannot bear: 100,000 levels of `- - -` end the process, which nothing can catch.
const mostIndented = 256;
const mostOpenBrackets = 256;

/**
 * The first line that may be nested too deeply to be handed to a YAML parser, counted from 1; null where all is well. An upper bound on the
 * depth: brackets in text count too, and indentation counts as if each column were a level.
 */
export function firstDeepLine(text: string): number | null {
  let open = 0;
  for (const [i, line] of text.split('\n').entries()) {
    if (/[^ \t\-?:]/.exec(line.slice(0, mostIndented + 1)) === null && line.length > mostIndented) return i + 1;
    for (const character of line) {
      if (character === '[' || character === '{') open += 1;
      else if (character === ']' || character === '}') open = Math.max(0, open - 1);
      if (open > mostOpenBrackets) return i + 1;
    }
  }
  return null;
}
