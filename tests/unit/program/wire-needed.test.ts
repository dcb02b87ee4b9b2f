import { expect, it } from 'vitest';
import { wireNeededMm } from '@/lib/program/wire-needed';
import { exampleProfile } from './example';

it('charges the spool with every piece and every trim', () => {
  expect(wireNeededMm(exampleProfile, { pieces: 40, lengthMm: 63.5 })).toBe(40 * 63.5 + 8);
  expect(wireNeededMm(exampleProfile, { pieces: 40, lengthMm: 63.5 }, 3)).toBe(40 * 63.5 + 24);
  expect(wireNeededMm(exampleProfile, { pieces: 0, lengthMm: 63.5 }, 0)).toBe(0);
});
