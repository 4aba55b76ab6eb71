import { parse, parseQuery } from '$lib/api/parse';
import { acceptSchema, comparisonFilterSchema, comparisonPageSchema } from '$lib/domain/comparison';
import { guardedAction, guardedLoad } from '$lib/server/auth/guards';
import { cancelRemeasure } from '$lib/server/measure/cancel-remeasure';
import { readRemeasure } from '$lib/server/measure/read-remeasure';
import { acceptMeasurements, previewAcceptance } from '$lib/server/review/accept-measurements';
import { compareMeasurements } from '$lib/server/review/compare-measurements';
import { undoAcceptance } from '$lib/server/review/undo-acceptance';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ params, locals, url }: PageServerLoadEvent) => {
  const filter = parseQuery(
    withoutEmpty(url),
    comparisonFilterSchema.extend({ cursor: comparisonPageSchema.shape.cursor }),
  );
  const { cursor, ...wanted } = filter;
  const { problems, mayCancel } = await readRemeasure(locals.actor, params.remeasure);
  const comparison = await compareMeasurements(locals.actor, params.remeasure, { ...wanted, cursor, limit: 200 });
  const acceptance = await previewAcceptance(locals.actor, params.remeasure, wanted);
  return { ...comparison, ...acceptance, filter: wanted, problems, mayCancel, cursor: cursor ?? null };
});

/** A form without script sends every field, the empty ones too. */
function withoutEmpty(url: URL): URL {
  const clean = new URL(url);
  for (const [name, value] of url.searchParams) if (value === '') clean.searchParams.delete(name);
  return clean;
}

export const actions = {
  cancel: guardedAction('signed-in', async ({ params, locals }: RequestEvent) => {
    await cancelRemeasure(locals.actor, params.remeasure);
    return { cancelled: true };
  }),
  accept: guardedAction('signed-in', async ({ params, locals, request }: RequestEvent) => {
    const form = await request.formData();
    const given = Object.fromEntries([...form].filter(([name]) => name !== 'expected'));
    const filter = parse(comparisonFilterSchema, given, 'The filter');
    const wanted = parse(acceptSchema, { filter, expected: Number(form.get('expected')) }, 'The form');
    const { id, accepted } = await acceptMeasurements(locals.actor, params.remeasure, wanted);
    return { accepted, acceptance: id };
  }),
  undo: guardedAction('signed-in', async ({ locals, request }: RequestEvent) => {
    const { restored, changedSince } = await undoAcceptance(
      locals.actor,
      String((await request.formData()).get('acceptance') ?? ''),
    );
    return { restored, changedSince };
  }),
};
