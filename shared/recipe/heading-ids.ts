/** Gives each heading an id of its own, made of its words: `How it works` is `how-it-works`, the second one `how-it-works-2`. */
export class HeadingIds {
  readonly #taken = new Set<string>();

  take(text: string): string {
    const words = text
      .normalize('NFKC')
      .toLowerCase()
      .replace(/[^\p{L}\p{N}]+/gu, '-')
      .replace(/^-+|-+$/g, '')
      .slice(0, 60);
    const base = words === '' ? 'section' : words;
    let id = base;
    for (let count = 2; this.#taken.has(id); count++) id = `${base}-${count}`;
    this.#taken.add(id);
    return id;
  }

  has(id: string): boolean {
    return this.#taken.has(id);
  }

  all(): readonly string[] {
    return [...this.#taken];
  }
}
