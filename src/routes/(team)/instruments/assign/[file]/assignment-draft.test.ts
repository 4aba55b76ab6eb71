import { describe, expect, it } from 'vitest';
import type { ShapeColumn, ShapePart } from '$lib/domain/file-shape';
import { assignmentOf, draftOf } from './assignment-draft';

const column = (name: string, guess: string | null = null): ShapeColumn => ({
  ...{ name, guess, unit: null, description: null, holds: 'numbers' },
  ...{ length: 9, first: ['1'] },
});
const part = (...columns: ShapePart['columns']): ShapePart => ({
  kind: 'table',
  extension: 0,
  label: 'the table',
  columns,
});

describe('draftOf', () => {
  it('starts from what names tell, and asks for an axis where there is one column', () => {
    const draft = draftOf(part(column('aa'), column('flux', 'flux'), column('good', 'good')));
    expect(draft.roles).toMatchObject({ flux: 'flux', wavelength: '' });
    expect(draft.axis).toBe('column');
    expect(draftOf(part(column('aa')))).toMatchObject({ axis: 'typed', roles: { flux: 'aa' } });
  });
});

describe('assignmentOf', () => {
  const table = part(column('aa'), column('bb'), column('cc'));
  const draft = draftOf(table);
  const roles = { ...draft.roles, wavelength: 'aa', flux: 'bb' };

  it('says what is missing until it is whole', () => {
    const missing = (changes: object) => assignmentOf({ ...draft, ...changes }, table);
    expect(missing({})).toEqual({ missing: 'Say which column is the flux.' });
    expect(missing({ roles: { ...roles, wavelength: '' } })).toHaveProperty(
      'missing',
      expect.stringContaining('wavelength'),
    );
    expect(missing({ roles: { ...roles, wavelength: 'bb' } })).toHaveProperty(
      'missing',
      expect.stringContaining('one column'),
    );
    expect(missing({ roles, axis: 'typed', axisFirst: '4000', axisStep: '0' })).toHaveProperty('missing');
    expect(missing({ roles: { ...roles, error: 'cc', variance: 'cc' } })).toHaveProperty('missing');
  });

  it('gives names, columns, units and medium once it is', () => {
    const whole = { ...draft, roles: { ...roles, error: 'cc' }, wavelengthUnit: ' nm ', medium: 'air' as const };
    expect(assignmentOf(whole, table)).toEqual({
      assignment: {
        names: ['aa', 'bb', 'cc'],
        columns: { wavelength: 'aa', flux: 'bb', error: 'cc', wavelengthUnit: 'nm' },
        medium: 'air',
      },
    });
    const typed = {
      ...draft,
      roles,
      axis: 'typed' as const,
      axisFirst: '400,5',
      axisStep: '0.25',
      wavelengthUnit: 'nm',
    };
    expect(assignmentOf(typed, table)).toMatchObject({
      assignment: { columns: { flux: 'bb', axis: { first: 400.5, step: 0.25 }, wavelengthUnit: 'nm' } },
    });
    expect(assignmentOf(typed, table)).not.toHaveProperty('assignment.columns.wavelength');
  });
});
