import { ChangeDetectionStrategy, Component } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { FormControl, Validators } from '@angular/forms';
import { FormField } from './form-field';

@Component({
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [FormField],
  template: `<sr-form-field label="Vessels" type="number" step="1" [control]="vessels" />
    <sr-form-field label="Notes" [control]="notes" />`,
})
class Form {
  readonly vessels = new FormControl(24, { nonNullable: true, validators: [Validators.min(1)] });
  readonly notes = new FormControl('', { nonNullable: true });
}

describe('one line of a form', () => {
  it('gives a number where a number is asked for, and text elsewhere', () => {
    const fixture = TestBed.createComponent(Form);
    fixture.detectChanges();
    const [vessels, notes] = (fixture.nativeElement as HTMLElement).querySelectorAll('input');
    const type = (input: HTMLInputElement | undefined, text: string) => {
      input!.value = text;
      input!.dispatchEvent(new Event('input'));
    };
    type(vessels, '6');
    type(notes, '6');
    expect(fixture.componentInstance.vessels.value).toBe(6);
    expect(fixture.componentInstance.notes.value).toBe('6');
    type(vessels, '0');
    vessels!.dispatchEvent(new Event('blur'));
    fixture.detectChanges();
    expect((fixture.nativeElement as HTMLElement).querySelector('mat-error')?.textContent).toBe('1 or more.');
  });
});
