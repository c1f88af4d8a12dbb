/** An invented recipe whose gain can be changed so that a number of its example, and designs, move with it. */
export function shuntText({
  gain,
  words = 'A shunt turns current into a small voltage.',
  slug = 'shunt-reading',
}: {
  gain: 20 | 25;
  words?: string;
  slug?: string;
}) {
  return `---
title: Shunt reading for the works car
slug: ${slug}
summary: Turns the motor current of the works car into a voltage for the meter.
hazards: [none]
---

## What it is for

${words} An amplifier makes it large enough for the meter.

<Calculator id="shunt" title="Your numbers">
  <Given name="I" label="Motor current" quantity="current" value="5 A" min="0 A" max="40 A" />
  <Given name="R_s" label="Shunt" quantity="resistance" value="10 mΩ" min="1 mΩ" max="1 Ω" />
  <Given name="G" label="Gain" quantity="ratio" value="${gain}" min="1" max="1000" />
  <Result name="V_out" label="Output" formula="G * I * R_s" />
  <Limit name="meter range" of="V_out" to="3 V" near="0.2 V" says="The meter reads no further." />
  <Example title="Pulling away at 10 A" source="own arithmetic">
    <Set name="I" to="10 A" />
    <Expect name="V_out" to="${gain / 10} V" />
  </Example>
</Calculator>
`;
}
