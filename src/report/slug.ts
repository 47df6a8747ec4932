/** The address of a heading, as code hosts make it: lower case, hyphens for spaces, nothing but letters, digits and hyphens. */
export function slug(words: string): string {
  return words
    .toLowerCase()
    .replace(/[^\p{L}\p{N}\s_-]/gu, '')
    .trim()
    .replace(/\s+/g, '-');
}
