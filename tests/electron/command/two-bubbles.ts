/** A small sound scenario: two bubbles of pure liquid on one tube, which cannot hold. */
export const TWO_BUBBLES = {
  format: 'frothwright',
  version: 1,
  title: 'Two bubbles on one tube',
  temperature: '25 degC',
  gases: { air: {} },
  recipes: { bare: { tension: { law: 'constant', clean: '72 mN/m' } } },
  nodes: [
    { id: 'A', kind: 'bubble', radius: '5 mm', mouth: '2 mm', recipe: 'bare', gas: { air: 1 } },
    { id: 'B', kind: 'bubble', radius: '4.9 mm', mouth: '2 mm', recipe: 'bare', gas: { air: 1 } },
  ],
  links: [{ id: 't1', kind: 'tube', from: 'A', to: 'B', bore: '0.2 mm', length: '50 mm' }],
  run: { until: '60 s', frames: 20 },
  criteria: [{ measure: 'pair-margin', above: 1.1 }],
};
