import { ownAddress } from './sign-in-page';

describe('where a sign-in leads', () => {
  it('is the page that was asked for', () => {
    expect(ownAddress('/batches/4711?tab=curve')).toBe('/batches/4711?tab=curve');
  });

  it('is never another site', () => {
    for (const foreign of [
      '//elsewhere.example',
      'https://elsewhere.example',
      '/\\elsewhere.example',
      undefined,
    ])
      expect(ownAddress(foreign)).toBe('/');
  });
});
