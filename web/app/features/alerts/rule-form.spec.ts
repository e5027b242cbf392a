import { describe, expect, it } from 'vitest';
import type { Rule } from '#shared/contract/alerts';
import { studioFormats } from '../../core/time/studio-formats';
import { ruleForm, ruleOf } from './rule-form';
import { limitInWords } from './rule-words';

const rule: Rule = {
  ...{ kind: 'too-warm', enabled: true, severity: 'warning' },
  ...{ onDelayMinutes: 15, offDelayMinutes: 20, clearBy: 0.5 },
};
const damp: Rule = { ...rule, kind: 'too-damp', clearBy: 2 };
const limits = { bandLow: 18, bandHigh: 24, heatLimit: 26, humidityHigh: 65, swingLimit: 5, slipDays: 1 };

describe('a rule as a form', () => {
  it('shows a difference of temperatures in the person’s unit and gives it back in K', () => {
    const form = ruleForm(rule, 'F');
    expect(form.getRawValue().clearBy).toBe(0.9);
    expect(ruleOf(form, 'F')).toEqual(rule);
    form.controls.clearBy.setValue(1.8);
    expect(ruleOf(form, 'F').clearBy).toBe(1);
    expect(ruleOf(ruleForm(rule, 'C'), 'C')).toEqual(rule);
  });

  it('leaves per cent alone', () => {
    expect(ruleForm(damp, 'F').getRawValue().clearBy).toBe(2);
    expect(ruleOf(ruleForm(damp, 'F'), 'F')).toEqual(damp);
  });

  it('takes at most twelve hours and 20 K', () => {
    const form = ruleForm(rule, 'F');
    form.controls.onDelayMinutes.setValue(721);
    form.controls.clearBy.setValue(36.1);
    expect([form.controls.onDelayMinutes.valid, form.controls.clearBy.valid]).toEqual([false, false]);
    form.controls.clearBy.setValue(36);
    expect(form.controls.clearBy.valid).toBe(true);
  });
});

describe('the limit of a rule in words', () => {
  const words = (kind: Rule['kind'], heatLimit: number | null = 25) =>
    limitInWords(kind, limits, { heatLimit }, studioFormats('America/Denver', 'F')).replaceAll('\u00a0', ' ');

  it('is told in the person’s unit', () => {
    expect(words('too-warm')).toBe('Limit now: 77.0 °F.');
    expect(words('too-warm', null)).toMatch(/^No limit now/);
    expect(words('too-cold')).toBe('Band from 64.4 °F; told when dates slip by more than 1 day.');
    expect(words('swinging')).toBe('Calm swing: 9.0 °F.');
    expect(words('battery')).toBe('');
  });
});
