import { createHash } from 'node:crypto';
import { JSDOM } from 'jsdom';
import { expect } from 'vitest';

/** What every page that this program writes must keep, whatever the study holds. */
export function expectSafePage(html: string): Document {
  const { document } = new JSDOM(html).window;
  expect([...document.querySelectorAll('script, iframe, object, embed, form, link, base, foreignObject, audio, video')]).toEqual([]);
  expect([...document.querySelectorAll('*')].flatMap((element) => [...element.attributes].flatMap((one) => faultOf(element, one)))).toEqual([]);
  expectPolicy(document);
  expectIds(document);
  return document;
}

/** What is wrong with an attribute, by its place. */
function faultOf(element: Element, { name, value }: Attr): string[] {
  const tag = element.tagName.toLowerCase();
  const leads = name === 'src' || name === 'action' || name.endsWith('href');
  const wrong =
    name.startsWith('on') ||
    name === 'style' ||
    (leads && (tag !== 'a' || !/^(?:#|https?:\/\/|mailto:)/.test(value))) ||
    (/url\(/i.test(value) && name !== 'content' && !/^url\(#[\w-]+\)$/.test(value) && !['aria-label', 'aria-description'].includes(name));
  return wrong ? [`${tag} ${name}="${value.slice(0, 80)}"`] : [];
}

function expectPolicy(document: Document): void {
  const styles = [...document.querySelectorAll('style')];
  expect(styles).toHaveLength(1);
  const style = styles[0]!.textContent;
  const digest = createHash('sha256').update(style).digest('base64');
  expect(document.querySelector('meta[http-equiv="Content-Security-Policy"]')?.getAttribute('content')).toBe(
    `default-src 'none'; img-src data:; style-src 'sha256-${digest}'; base-uri 'none'; form-action 'none'`,
  );
  expect(style).not.toMatch(/@import|url\(/);
}

function expectIds(document: Document): void {
  const ids = [...document.querySelectorAll('[id]')].map(({ id }) => id);
  expect(ids.length).toBe(new Set(ids).size);
  const links = [...document.querySelectorAll('a[href^="#"]')].map((link) => link.getAttribute('href')!.slice(1));
  const names = ['aria-labelledby', 'aria-describedby'].flatMap((attribute) =>
    [...document.querySelectorAll(`[${attribute}]`)].flatMap((element) => element.getAttribute(attribute)!.split(' ')),
  );
  const known = new Set(ids);
  expect([...links, ...names].filter((id) => !known.has(id))).toEqual([]);
}
