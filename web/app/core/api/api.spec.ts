import { provideHttpClient } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestBed } from '@angular/core/testing';
import { FormControl, FormGroup } from '@angular/forms';
import type { batchRoutes } from '#shared/contract/batches';
import { Api, filled } from './api';
import { ApiError, sentenceOf, showFieldErrors } from './api-error';

const studioId = '00000001-0000-4000-8000-000000000001';

describe('a call of a route', () => {
  let api: Api;
  let http: HttpTestingController;

  beforeEach(() => {
    TestBed.configureTestingModule({ providers: [provideHttpClient(), provideHttpClientTesting()] });
    api = TestBed.inject(Api);
    http = TestBed.inject(HttpTestingController);
  });

  afterEach(() => http.verify());

  it('fills the path, leaves out what is not asked for, and answers the reply', async () => {
    const reply = api.call<typeof batchRoutes.list>('GET', '/api/studios/:studioId/batches', {
      params: { studioId },
      query: { search: 'fig & cedar', offset: 0, status: undefined },
    });
    const sent = http.expectOne((request) => request.url === `/api/studios/${studioId}/batches`);
    expect(sent.request.params.toString()).toBe('search=fig%20%26%20cedar&offset=0');
    expect(sent.request.body).toBeNull();
    sent.flush({ total: 0, batches: [] });
    expect(await reply).toEqual({ total: 0, batches: [] });
  });

  it('fails with the sentence of the gateway', async () => {
    const reply = api.call<typeof batchRoutes.list>('GET', '/api/studios/:studioId/batches', {
      params: { studioId },
    });
    http
      .expectOne(() => true)
      .flush(
        { type: 'about:blank', title: 'busy', status: 503, code: 'busy', detail: 'Try again in a minute.' },
        { status: 503, statusText: '' },
      );
    const error: unknown = await reply.catch((thrown: unknown) => thrown);
    expect(error).toBeInstanceOf(ApiError);
    expect((error as ApiError).code).toBe('busy');
    expect(sentenceOf(error)).toBe('Try again in a minute.');
  });

  it('says that the gateway cannot be reached when there is no answer', async () => {
    const reply = api.call<typeof batchRoutes.list>('GET', '/api/studios/:studioId/batches', {
      params: { studioId },
    });
    http.expectOne(() => true).error(new ProgressEvent('error'));
    expect(sentenceOf(await reply.catch((thrown: unknown) => thrown))).toBe(
      'The gateway cannot be reached. Check the connection and try again.',
    );
  });

  it('escapes parameters and insists on having them', () => {
    expect(filled('/api/invitations/:token', { token: 'a/b' })).toBe('/api/invitations/a%2Fb');
    expect(() => filled('/api/invitations/:token', {})).toThrow(TypeError);
  });
});

describe('problems named field by field', () => {
  const refused = (fields: { path: string; message: string }[]) =>
    new ApiError(400, {
      type: 'about:blank',
      title: 'bad input',
      status: 400,
      code: 'bad-input',
      detail: 'Two fields need another look.',
      fields,
    });

  it('stand beside their fields', () => {
    const form = new FormGroup({
      name: new FormControl('x'),
      limits: new FormGroup({ bandLow: new FormControl(30) }),
    });
    const left = showFieldErrors(
      refused([{ path: 'limits.bandLow', message: 'Below the upper edge, please.' }]),
      form,
    );
    expect(left).toBeNull();
    expect(form.get('limits.bandLow')?.errors).toEqual({ server: 'Below the upper edge, please.' });
    expect(form.get('limits.bandLow')?.touched).toBe(true);
  });

  it('are told for the form as a whole when they have no field', () => {
    const form = new FormGroup({ name: new FormControl('x') });
    expect(showFieldErrors(refused([{ path: 'version', message: 'Somebody was faster.' }]), form)).toBe(
      'Somebody was faster.',
    );
    expect(showFieldErrors(refused([]), form)).toBe('Two fields need another look.');
  });
});
