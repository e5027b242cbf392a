import { FormControl, FormGroup, Validators } from '@angular/forms';
import { describe, expect, it } from 'vitest';
import { ApiError } from './api-error';
import { Saving } from './saving';

const form = () => new FormGroup({ name: new FormControl('Loft', { validators: [Validators.required] }) });
const refusal = (fields: { path: string; message: string }[]) =>
  new ApiError(400, {
    type: 'about:blank',
    title: '',
    status: 400,
    code: 'bad-input',
    detail: 'Check it.',
    fields,
  });

describe('sending a form', () => {
  it('sends nothing while the form is not complete, and marks what is missing', async () => {
    const empty = form();
    empty.setValue({ name: '' });
    let sent = 0;
    expect(await new Saving().form(empty, async () => sent++)).toBe(false);
    expect(sent).toBe(0);
    expect(empty.controls.name.touched).toBe(true);
  });

  it('puts the refusal of a field beside it and the rest into a sentence', async () => {
    const saving = new Saving();
    const filled = form();
    const refused = await saving.form(filled, async () => {
      throw refusal([
        { path: 'name', message: 'Taken.' },
        { path: 'elsewhere', message: 'Too many rooms.' },
      ]);
    });
    expect(refused).toBe(false);
    expect(filled.controls.name.errors).toEqual({ server: 'Taken.' });
    expect(saving.fault()).toBe('Too many rooms.');
  });

  it('does one thing at a time and forgets the last fault', async () => {
    const saving = new Saving();
    await saving.act(async () => {
      throw refusal([]);
    });
    expect(saving.fault()).toBe('Check it.');
    let finish = () => undefined as void;
    const first = saving.act(() => new Promise<void>((resolve) => (finish = resolve)));
    expect(saving.busy()).toBe(true);
    expect(saving.fault()).toBeNull();
    expect(await saving.act(async () => undefined)).toBe(false);
    finish();
    expect(await first).toBe(true);
    expect(saving.busy()).toBe(false);
  });
});
