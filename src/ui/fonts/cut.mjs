// Takes the faces that the pages use out of their packages and cuts them to the signs that recipes use.
// Run by hand after a font package is updated: node src/ui/fonts/cut.mjs
import { copyFileSync, readFileSync, writeFileSync } from 'node:fs';
import subsetFont from 'subset-font';

const modules = new URL('../../../node_modules/', import.meta.url);
const here = new URL('./', import.meta.url);

const whole = {
  'literata-latin-400-normal': '@fontsource/literata',
  'literata-latin-400-italic': '@fontsource/literata',
  'literata-latin-600-normal': '@fontsource/literata',
  'literata-greek-400-normal': '@fontsource/literata',
  'literata-greek-600-normal': '@fontsource/literata',
  'sofia-sans-semi-condensed-latin-wght-normal': '@fontsource-variable/sofia-sans-semi-condensed',
  'commit-mono-latin-400-normal': '@fontsource/commit-mono',
};
for (const [file, from] of Object.entries(whole)) {
  copyFileSync(new URL(`${from}/files/${file}.woff2`, modules), new URL(`${file}.woff2`, here));
}

const licences = {
  literata: '@fontsource/literata',
  'sofia-sans-semi-condensed': '@fontsource-variable/sofia-sans-semi-condensed',
  'stix-two-text': '@fontsource-variable/stix-two-text',
  'stix-two-math': '@fontsource/stix-two-math',
  'ysabeau-office': '@fontsource-variable/ysabeau-office',
  'commit-mono': '@fontsource/commit-mono',
};
for (const [name, from] of Object.entries(licences)) {
  copyFileSync(new URL(`${from}/LICENSE`, modules), new URL(`LICENSE-${name}.txt`, here));
}

const range = (from, to) => Array.from({ length: to - from + 1 }, (_, i) => String.fromCodePoint(from + i)).join('');
const greek = `${range(0x391, 0x3a9) + range(0x3b1, 0x3c9)}ϑϕϵ`;
const cuts = [
  {
    to: 'sofia-greek',
    from: '@fontsource-variable/sofia-sans-semi-condensed/files/sofia-sans-semi-condensed-greek-wght-normal.woff2',
    text: greek,
  },
  {
    to: 'stix-letters-latin',
    from: '@fontsource-variable/stix-two-text/files/stix-two-text-latin-wght-italic.woff2',
    text: `${range(0x20, 0x7e)}−×·±`,
  },
  {
    to: 'stix-letters-greek',
    from: '@fontsource-variable/stix-two-text/files/stix-two-text-greek-wght-italic.woff2',
    text: greek,
  },
  {
    to: 'signs',
    from: '@fontsource-variable/ysabeau-office/files/ysabeau-office-math-wght-normal.woff2',
    text: `${range(0x2070, 0x208e)}←↑→↓↔⇒∂∆∏∑√∝∞∠∥∫≈≠≡≤≥≪≫⊥`,
  },
  {
    // harfbuzz keeps the MATH table, so brackets and roots still stretch
    to: 'stix-math',
    from: '@fontsource/stix-two-math/files/stix-two-math-latin-400-normal.woff2',
    text:
      range(0x20, 0x7e) +
      range(0xa0, 0xff) +
      range(0x391, 0x3c9) +
      range(0x1d434, 0x1d49b) +
      range(0x1d6e2, 0x1d71b) +
      range(0x2190, 0x2194) +
      range(0x2200, 0x222b) +
      '−√∑∏∫∞≈≠≡≤≥≪≫±×÷·∥∠°′″…⋯⟨⟩⌊⌋⌈⌉‖ℎ\u2061\u2062\u2063\u2064ˆ˜¯˙¨→ıȷ',
  },
];
for (const { to, from, text } of cuts) {
  const cut = await subsetFont(readFileSync(new URL(from, modules)), text, { targetFormat: 'woff2' });
  writeFileSync(new URL(`${to}.woff2`, here), cut);
}
