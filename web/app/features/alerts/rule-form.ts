import { FormControl, FormGroup, Validators } from '@angular/forms';
import type { Rule, Severity } from '#shared/contract/alerts';
import { differenceInFahrenheit } from '#shared/units/temperature';
import type { TemperatureUnit } from '../../core/units/units';
import { clearByUnit } from './rule-words';

const LONGEST_MINUTES = 720;
const MOST_TO_CLEAR = 20;
const FAHRENHEIT_PER_KELVIN = differenceInFahrenheit(1);

export type RuleForm = ReturnType<typeof ruleForm>;

/** One rule as a form; a difference of temperatures stands in the person's unit. */
export function ruleForm(rule: Rule, unit: TemperatureUnit) {
  const factor = factorOf(rule.kind, unit);
  return new FormGroup({
    kind: new FormControl(rule.kind, { nonNullable: true }),
    enabled: new FormControl(rule.enabled, { nonNullable: true }),
    severity: new FormControl<Severity>(rule.severity, { nonNullable: true }),
    onDelayMinutes: needed(rule.onDelayMinutes, LONGEST_MINUTES),
    offDelayMinutes: needed(rule.offDelayMinutes, LONGEST_MINUTES),
    clearBy: needed(rounded(rule.clearBy * factor), MOST_TO_CLEAR * factor),
  });
}

/** The rule a form holds, differences back in K. */
export function ruleOf(form: RuleForm, unit: TemperatureUnit): Rule {
  const value = form.getRawValue();
  return { ...value, clearBy: rounded(value.clearBy / factorOf(value.kind, unit)) };
}

function factorOf(kind: Rule['kind'], unit: TemperatureUnit): number {
  return clearByUnit(kind) === 'kelvin' && unit === 'F' ? FAHRENHEIT_PER_KELVIN : 1;
}

function needed(value: number, max: number) {
  return new FormControl(value, {
    nonNullable: true,
    validators: [Validators.required, Validators.min(0), Validators.max(max)],
  });
}

function rounded(value: number): number {
  return Math.round(value * 1000) / 1000;
}
