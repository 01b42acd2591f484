import { expect, test } from 'vitest';
import { checkModel } from '../../src/commands/check-model.js';

const asked = { model: '(0,1,1)x(0,1,1)4', scale: null, constant: null, every: 'quarter' } as const;

test('a model that can be fitted draws no remark', () => {
  expect(checkModel(asked)).toEqual([]);
  expect(checkModel({ ...asked, model: 'advise', scale: 'log' })).toEqual([]);
  expect(checkModel({ ...asked, every: null, model: '(0,1,1)x(0,1,1)12' })).toEqual([]);
});

test('model, scale and constant are each remarked on, all at once', () => {
  const remarks = checkModel({ ...asked, model: '(0,1,1)(0,1,1)', scale: 'square' });
  expect(remarks.map(({ key }) => key)).toEqual(['model', 'scale']);
  expect(remarks[0]?.message).toMatch(/^model "\(0,1,1\)\(0,1,1\)" needs/);
  expect(remarks[1]?.message).toMatch(/scale "square"/);
  expect(checkModel({ ...asked, constant: true })).toEqual([
    { key: 'constant', message: expect.stringMatching(/constant can't be "yes"/) },
  ]);
});

test('a monthly model on quarters is a slip', () => {
  const [remark] = checkModel({ ...asked, model: '(0,1,1)x(0,1,1)12' });
  expect(remark?.message).toMatch(/season of 12 periods.*write 4/);
});
