import { describe, expect, it, vi } from 'vitest';
import { ApiError } from './api-client';
import { errorText, placeErrors } from './form-errors';

type Form = { name: string; contact: { phone: string } };
const problem = (errors: { path: string; message: string }[], detail = 'See the fields.') =>
  new ApiError(422, { type: 'about:blank', title: 'Some of this cannot be used', status: 422, detail, instance: 'req-1', code: 'bad-input', errors });

describe('errors of the server', () => {
  it('stand beside the field they name, and the first one takes the focus', () => {
    const setError = vi.fn();
    const left = placeErrors<Form>(problem([{ path: 'contact.phone', message: 'At most 60 characters' }, { path: 'name', message: 'Give a name' }]), setError, ['name', 'contact.phone']);
    expect(left).toBeNull();
    expect(setError.mock.calls).toEqual([
      ['contact.phone', { type: 'server', message: 'At most 60 characters' }, { shouldFocus: true }],
      ['name', { type: 'server', message: 'Give a name' }, { shouldFocus: false }],
    ]);
  });

  it('that name no field of the form are said above it', () => {
    expect(placeErrors<Form>(problem([{ path: 'version', message: 'Load the page again' }]), vi.fn(), ['name'])).toBe('version: Load the page again');
    expect(placeErrors<Form>(problem([]), vi.fn(), ['name'])).toBe('Some of this cannot be used. See the fields.');
  });

  it('give the request id to quote', () => {
    expect(errorText(problem([]))).toBe('Some of this cannot be used. See the fields. Request req-1.');
    expect(errorText(problem([], 'Somebody was quicker'))).toBe('Some of this cannot be used. Somebody was quicker. Request req-1.');
  });
});
