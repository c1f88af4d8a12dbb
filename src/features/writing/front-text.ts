const FRONT = /^---\r?\n([\s\S]*?)\r?\n---/;

/** The value of a one-line key of the front matter, without its quotes; '' where there is none. For labels, not for compiling. */
export function frontValue(text: string, key: string): string {
  const front = FRONT.exec(text)?.[1] ?? '';
  const line = front.split(/\r?\n/).find((each) => each.startsWith(`${key}:`));
  const value = line?.slice(key.length + 1).trim() ?? '';
  return /^"(?:[^"\\]|\\.)*"$|^'[^']*'$/.test(value) ? value.slice(1, -1) : value;
}

/** Puts another value at a one-line key, or the key at the end of the front matter; null takes the key out. */
export function withFrontValue(text: string, key: string, value: string | null): string {
  const found = FRONT.exec(text);
  if (found === null) return text;
  const lines = (found[1] ?? '').split(/\r?\n/);
  const at = lines.findIndex((line) => line.startsWith(`${key}:`));
  const line = value === null ? [] : [`${key}: ${yamlText(value)}`];
  if (at >= 0) lines.splice(at, 1, ...line);
  else lines.push(...line);
  return `---\n${lines.join('\n')}\n---${text.slice(found[0].length)}`;
}

/** Plain where YAML reads it back as the same text, else in double quotes, whose escapes are those of JSON. */
function yamlText(value: string): string {
  return /^[A-Za-z][\w ,.()/+-]*$/.test(value) && !/^(?:true|false|null|yes|no|on|off)$/i.test(value)
    ? value
    : JSON.stringify(value);
}

/** A slug from a title: `Rail splitter, 9 V` → `rail-splitter-9-v`. Empty where nothing usable is in it. */
export function slugOf(title: string): string {
  const slug = title
    .normalize('NFKD')
    .replace(/[\u0300-\u036f]/g, '')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .slice(0, 80)
    .replace(/^-+|-+$/g, '');
  return slug.length >= 3 ? slug : '';
}

/** A text under another title, with the slug that follows from it and without the number, which belongs to the recipe it came from. */
export function retitled(text: string, title: string): string {
  const slug = slugOf(title);
  const titled = withFrontValue(text, 'title', title);
  const named = slug === '' ? titled : withFrontValue(titled, 'slug', slug);
  return withFrontValue(named, 'number', null);
}
