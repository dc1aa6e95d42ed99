/** Checks that a text is well-formed XML, strictly enough for what programs write; and takes it apart. */

export interface XmlElement {
  readonly name: string;
  readonly attributes: Readonly<Record<string, string>>;
  /** Attributes of all elements around it, the inner ones winning. */
  readonly inherited: Readonly<Record<string, string>>;
  text: string;
}

const ATTRIBUTE = /\s+([A-Za-z_:][\w:.-]*)="([^"<]*)"/y;
const ENTITY = /&(?!(?:amp|lt|gt|quot|apos|#\d+|#x[0-9a-fA-F]+);)/;
const FORBIDDEN = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/;

/** Elements in document order. Throws at the first thing that a strict parser would refuse. */
export function parseXml(document: string): XmlElement[] {
  if (FORBIDDEN.test(document)) throw new Error('a character that XML forbids');
  const bare = ENTITY.exec(document);
  if (bare !== null) throw new Error(`a bare ampersand at ${bare.index}`);
  const elements: XmlElement[] = [];
  const open: XmlElement[] = [];
  let at = 0;
  while (at < document.length) {
    const next = document.indexOf('<', at);
    const text = document.slice(at, next === -1 ? document.length : next);
    const around = open.at(-1);
    if (around === undefined && text.trim() !== '') throw new Error(`text outside the root: ${text}`);
    if (around !== undefined) around.text += unescape(text);
    if (next === -1) break;
    const end = document.indexOf('>', next);
    if (end === -1) throw new Error('a tag does not end');
    const tag = document.slice(next + 1, end);
    if (tag.startsWith('/')) {
      const closed = open.pop();
      if (closed?.name !== tag.slice(1)) throw new Error(`</${tag.slice(1)}> closes <${closed?.name ?? ''}>`);
    } else {
      const element = readTag(tag, around);
      if (around === undefined && elements.length > 0) throw new Error('a second root');
      elements.push(element);
      if (!tag.endsWith('/')) open.push(element);
    }
    at = end + 1;
  }
  if (open.length > 0) throw new Error(`<${open.at(-1)!.name}> is not closed`);
  return elements;
}

function readTag(tag: string, around: XmlElement | undefined): XmlElement {
  const body = tag.endsWith('/') ? tag.slice(0, -1) : tag;
  const name = /^[A-Za-z_][\w:.-]*/.exec(body)?.[0];
  if (name === undefined) throw new Error(`not a tag: <${tag}>`);
  const attributes: Record<string, string> = {};
  ATTRIBUTE.lastIndex = name.length;
  let reached = name.length;
  for (let match = ATTRIBUTE.exec(body); match !== null; match = ATTRIBUTE.exec(body)) {
    if (match[1]! in attributes) throw new Error(`attribute ${match[1]!} twice in <${tag}>`);
    attributes[match[1]!] = unescape(match[2]!);
    reached = ATTRIBUTE.lastIndex;
  }
  if (body.slice(reached).trim() !== '') throw new Error(`not an attribute: ${body.slice(reached)}`);
  return { name, attributes, inherited: { ...around?.inherited, ...attributes }, text: '' };
}

function unescape(text: string): string {
  return text
    .replace(/&lt;/g, '<')
    .replace(/&gt;/g, '>')
    .replace(/&quot;/g, '"')
    .replace(/&#39;/g, "'")
    .replace(/&amp;/g, '&');
}
