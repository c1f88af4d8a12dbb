/**
 * Tells why a version of Node cannot run this program; null when it can. Plain JavaScript without imports: it runs before anything else.
 * @param {string} version such as "20.20.2"
 * @param {string} range the form package.json uses: ">=20.20.2 <21"
 * @returns {string | null}
 */
export function nodeProblem(version, range) {
  const [least, below] = range.split(' ').map((part) => part.replace(/^[<>=]+/, ''));
  if (compare(version, least) >= 0 && compare(version, below) < 0) return null;
  return `Node is ${version}, but Quadrille needs ${least} or a later one below ${below}.`;
}

/**
 * @param {string} a
 * @param {string} b
 */
function compare(a, b) {
  const [left, right] = [a, b].map((text) => text.split('.').map(Number));
  for (let i = 0; i < 3; i++) {
    const difference = (left[i] ?? 0) - (right[i] ?? 0);
    if (difference !== 0) return difference;
  }
  return 0;
}
