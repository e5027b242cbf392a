import { describe, expect, it } from 'vitest';
import { refusalOf } from './password-rules.js';

const owner = { company: 'Larkrise Candleworks', name: 'Ines Marlow', email: 'ines.marlow@larkrise.example' };

describe('refusalOf', () => {
  it.each([
    'password',
    'Password123!',
    'p4ssw0rd',
    'P@$$word2026',
    'iloveyou1',
    'candlecandle',
    '!!welcome!!',
    'trustno1!!',
    'Dragon2024',
  ])('refuses %s, which is tried first', (password) => {
    expect(refusalOf(password, owner)).toContain('tried first');
  });

  it.each(['aaaaaaaa', 'abababab', '11111111112', 'ababcabcab'])('refuses %s, which repeats', (password) => {
    expect(refusalOf(password, owner)).toContain('repeats');
  });

  it.each(['12345678', '987654321', 'qwertyuiop', 'abcdefgh', 'qwertz1234', '1q2w3e4r5t', 'asdfghjkl123'])(
    'refuses %s, which walks along the keyboard',
    (password) => {
      expect(refusalOf(password, owner)).toContain('walks along');
    },
  );

  it.each([
    'stillroom',
    'Stillroom2026',
    'larkrise!!',
    'Candleworks1',
    'ines.marlow',
    'Marlow1985',
    'inesmarlow',
  ])('refuses %s, made of own words', (password) => {
    expect(refusalOf(password, owner)).toContain('guessed first');
  });

  it.each([
    'copper kettle by noon',
    'vB7#kq2Lw9',
    'Ines mag Regen und Tee',
    'stillroom copper kettle',
    'паром кухня сито',
    '🕯️ honig & harz',
    'x'.repeat(3) + 'kettle-noon-amber' + 'y'.repeat(100),
  ])('takes %s', (password) => {
    expect(refusalOf(password, owner)).toBeNull();
  });
});
