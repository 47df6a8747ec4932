/** Characters that XML does not allow at all: controls, halves of pairs, and two that are none. */
const forbidden = /(?![\t\n\r])\p{Cc}|\p{Cs}|[\ufffe\uffff]/gu;

function escaped(text: string): string {
  return text
    .replaceAll(forbidden, '\ufffd')
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;');
}

/**
 * An element as XML that HTML reads the same way. The document's own serialiser writes HTML: entities that XML does not know,
 * and control characters that it forbids.
 */
export function serialise(element: Element): string {
  const name = element.localName;
  const attributes = [...element.attributes]
    .sort((a, b) => (a.name < b.name ? -1 : 1))
    .map((attribute) => ` ${attribute.name}="${escaped(attribute.value)}"`)
    .join('');
  const inner = [...element.childNodes].map((node) => (node.nodeType === 1 ? serialise(node as Element) : escaped(node.textContent ?? ''))).join('');
  return inner === '' ? `<${name}${attributes}/>` : `<${name}${attributes}>${inner}</${name}>`;
}
