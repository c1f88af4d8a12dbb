const WIRE = { fill: 'none', stroke: 'currentColor', strokeWidth: 'var(--stroke-wire)' } as const;
const PART = { fill: 'var(--sheet)', stroke: 'currentColor', strokeWidth: 'var(--stroke-part)' } as const;

interface Name {
  readonly letter: string;
  readonly index: string;
  readonly x: number;
  readonly y: number;
  readonly anchor: 'start' | 'middle' | 'end';
}

const NAMES: readonly Name[] = [
  { letter: 'R', index: '1', x: 112, y: 62, anchor: 'middle' },
  { letter: 'R', index: '3', x: 112, y: 142, anchor: 'middle' },
  { letter: 'R', index: '2', x: 336, y: -18, anchor: 'middle' },
  { letter: 'R', index: '4', x: 194, y: 222, anchor: 'end' },
  { letter: 'V', index: '1', x: -14, y: 72, anchor: 'end' },
  { letter: 'V', index: '2', x: -14, y: 152, anchor: 'end' },
  { letter: 'V', index: 'REF', x: -14, y: 264, anchor: 'end' },
  { letter: 'V', index: 'OUT', x: 524, y: 106, anchor: 'middle' },
];

/** A difference amplifier with a reference input: what a recipe looks like, before anybody has signed in. */
export function CoverDrawing() {
  return (
    <svg viewBox="-64 -44 640 332" preserveAspectRatio="xMidYMid meet" aria-hidden="true">
      <path
        {...WIRE}
        d="M0 80H280M0 160H280M216 80V0H440V120M400 120H520M216 160V272H0M328 76.8V40M320 40h16M328 163.2V212"
      />
      <path {...PART} d="M280 48V192L400 120Z" />
      <path {...WIRE} strokeWidth={1.75} d="M290 80h12M290 160h12M296 154v12" />
      <path {...WIRE} strokeWidth={2.5} d="M314 212h28" />
      <rect {...PART} x="80" y="68" width="64" height="24" />
      <rect {...PART} x="80" y="148" width="64" height="24" />
      <rect {...PART} x="304" y="-12" width="64" height="24" />
      <rect {...PART} x="204" y="184" width="24" height="64" />
      {[
        [216, 80],
        [216, 160],
        [440, 120],
      ].map(([x, y]) => (
        <circle key={`${x} ${y}`} cx={x} cy={y} r="3.5" fill="currentColor" />
      ))}
      {[
        [-4, 80],
        [-4, 160],
        [-4, 272],
        [524, 120],
      ].map(([x, y]) => (
        <circle key={`${x} ${y}`} {...PART} strokeWidth="var(--stroke-wire)" cx={x} cy={y} r="4" />
      ))}
      {NAMES.map((name) => (
        <text
          key={name.letter + name.index}
          x={name.x}
          y={name.y}
          textAnchor={name.anchor}
          fill="currentColor"
          className="font-var italic"
          fontSize="19"
          fontWeight="500"
        >
          {name.letter}
          <tspan dy="3.5" fontSize="12" className="font-ui not-italic">
            {name.index}
          </tspan>
        </text>
      ))}
    </svg>
  );
}
