import type { AbstractControl } from '@angular/forms';

/**
 * The sentence beside a form field, or '' when it is fine. Knows the usual validators and the key `server`;
 * a validator of one's own gives its sentence as the value of its key.
 */
export function controlError(control: AbstractControl | null): string {
  const errors = control?.errors;
  if (!errors) return '';
  const [key, detail] = Object.entries(errors)[0] ?? [];
  if (typeof detail === 'string') return detail;
  const bounds = detail as { min?: number; max?: number; requiredLength?: number };
  switch (key) {
    case 'required':
      return 'Fill this in.';
    case 'email':
      return 'Give an e-mail address such as ines@example.org.';
    case 'min':
      return `${bounds.min} or more.`;
    case 'max':
      return `${bounds.max} or less.`;
    case 'minlength':
      return `At least ${bounds.requiredLength} characters.`;
    case 'maxlength':
      return `At most ${bounds.requiredLength} characters.`;
    default:
      return 'Check this.';
  }
}
