import { Readable } from 'node:stream';
import type { NightSnapshot } from '$lib/domain/night';
import { Refusal } from '$lib/domain/refusal';
import type { VerdictInput } from '$lib/domain/verdict';
import type { Actor } from '$lib/server/auth/permissions';
import { createNight } from '$lib/server/ingest/create-night';
import { listMeasurements } from '$lib/server/ingest/list-measurements';
import { listNights } from '$lib/server/ingest/list-nights';
import { readNight } from '$lib/server/ingest/read-night';
import { receiveFile } from '$lib/server/ingest/receive-file';
import { takeTargetList } from '$lib/server/ingest/take-target-list';
import { listCatalogues } from '$lib/server/query/list-catalogues';
import { createCatalogue } from '$lib/server/release/create-catalogue';
import { createDraft } from '$lib/server/release/create-draft';
import { freezeDraft } from '$lib/server/release/freeze-draft';
import { listDrafts } from '$lib/server/release/list-drafts';
import { listQueue } from '$lib/server/review/list-queue';
import { listTargets, listTargetsSchema } from '$lib/server/review/list-targets';
import { readSpectrum } from '$lib/server/review/read-spectrum';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { makeDemoPeople } from './accounts';
import { demoFiles, demoInstrument, demoTargetList, earlierDemoFiles, type DemoFile } from './demo-files';
import { differ } from './differ';

const CIVIL_DATE = '2026-09-14';
export const DEMO_CATALOGUE = 'halloran-lines';
const LOOK_EVERY_MS = 500;

interface WantedNight {
  civilDate: string;
  notes: string;
  files: DemoFile[];
}

const mainNight = (): WantedNight => ({
  civilDate: CIVIL_DATE,
  notes: 'Clear, seeing 0.9 arcsec, thin cloud after 06:00 UTC. Five fields, three exposures of 900 s each.',
  files: demoFiles(),
});

async function ensureNight(observer: Actor, { civilDate, notes, files }: WantedNight): Promise<string> {
  const found = (await listNights(observer)).find((night) => night.civilDate === civilDate);
  const { id } = found ?? (await createNight(observer, { civilDate, notes }));
  if (!found || found.files < files.length) {
    for (const { name, bytes } of files) await receiveFile(observer, id, { name, stream: Readable.from([bytes]) });
  }
  return id;
}

/** Waits until a worker has measured the night. */
async function whenMeasured(observer: Actor, nightId: string): Promise<NightSnapshot> {
  for (;;) {
    const night = await readNight(observer, nightId);
    if (night.done && night.spectra.total > 0) return night;
    await new Promise((resolve) => setTimeout(resolve, LOOK_EVERY_MS));
  }
}

/** Of the secure ones every so many is confirmed by a look. */
const CONFIRMED_EVERY = 3;

/**
 * Two scientists take turns at what the engine shows them: they accept the probable, confirm a share of the secure, and
 * agree where it found nothing; the ambiguous are left for whoever tries the demo.
 */
async function judge(scientists: Actor[], nightId: string): Promise<void> {
  const queue = await listQueue(scientists[0], { night: nightId, show: 'all' });
  const shown = queue.filter(
    ({ confidence }, i) =>
      confidence === 'probable' || confidence === 'none' || (confidence === 'secure' && i % CONFIRMED_EVERY === 0),
  );
  for (const [i, { id, judged }] of shown.entries()) {
    if (judged) continue;
    const scientist = scientists[i % scientists.length];
    const { spectrum } = await readSpectrum(scientist, id);
    const { confidence } = spectrum.measurement;
    const said: VerdictInput =
      confidence === 'secure' || confidence === 'probable'
        ? { kind: 'candidate', candidate: 0, confidence, flags: [], comment: '' }
        : { kind: 'no redshift', flags: ['low signal'], comment: '' };
    await recordVerdict(scientist, id, said);
  }
}

async function publish(drafter: Actor, signer: Actor, programme: string): Promise<void> {
  const catalogues = await listCatalogues(drafter);
  const catalogue = catalogues.find(({ slug }) => slug === DEMO_CATALOGUE);
  if (catalogue?.releases) return;
  if (!catalogue) {
    await createCatalogue(drafter, {
      programme,
      slug: DEMO_CATALOGUE,
      title: 'Emission-line redshifts from Cape Halloran',
      abstract:
        'Redshifts of galaxies and quasars from one night of fibre spectroscopy at Cape Halloran Observatory, 3700 to 9800 Å. ' +
        'The observatory, the night and every object are invented: the spectra are simulated, the measurements are real.',
    });
  }
  const { catalogues: curated } = await listDrafts(drafter);
  const open = curated.find(({ slug }) => slug === DEMO_CATALOGUE)?.draft;
  const selection = { confidence: ['secure' as const, 'probable' as const], engineAlone: true };
  const { id } = open ?? (await createDraft(drafter, DEMO_CATALOGUE, { selection, notes: 'The first night.' }));
  await freezeDraft(signer, DEMO_CATALOGUE, id);
}

/** Makes what is missing of the demo through the use-cases themselves; run again, it adds nothing. */
export async function makeDemo(accountsPath: string): Promise<{ observer: Actor; nightId: string }> {
  const { programme, actors } = await makeDemoPeople(accountsPath, demoInstrument);
  const actor = (firstName: string) => actors.get(firstName)!;
  const observer = actor('Rua');
  const nightId = await ensureNight(observer, mainNight());
  const earlier: string[] = [];
  for (const night of earlierDemoFiles()) earlier.push(await ensureNight(observer, night));
  for (const id of [nightId, ...earlier]) await whenMeasured(observer, id);
  const { lists } = await listTargets(observer, listTargetsSchema.parse({ programme }));
  if (lists.length === 0) await takeTargetList(observer, programme, demoTargetList());
  const catalogues = await listCatalogues(actor('Maren'));
  if (!catalogues.some(({ slug, releases }) => slug === DEMO_CATALOGUE && releases > 0)) {
    await judge([actor('Ines'), actor('Koji')], nightId);
    await publish(actor('Maren'), actor('Felix'), programme).catch((error: unknown) => {
      if (!(error instanceof Refusal)) throw error;
      throw new Error(`The demo release could not be frozen: ${error.message}`);
    });
    // After the release: an open question would stand against freezing it.
    await differ([actor('Ines'), actor('Koji')], earlier[0]);
  }
  return { observer, nightId };
}

/** The night's redshifts as a table of text, in the order of submission. */
export async function demoTable(observer: Actor, nightId: string): Promise<string> {
  const { rows } = await listMeasurements(observer, nightId, { limit: 5000, detail: 'table' });
  const head = `${'target'.padEnd(20)} ${'z'.padStart(10)} ${'error'.padStart(9)} ${'P'.padStart(6)}  confidence  class`;
  const lines = rows.map(({ name, redshift, redshiftError, probability, confidence, objectClass }) =>
    [
      (name ?? '').padEnd(20),
      (redshift?.toFixed(5) ?? '-').padStart(10),
      (redshift === null ? '-' : (redshiftError?.toFixed(5) ?? '-')).padStart(9),
      (probability?.toFixed(3) ?? '-').padStart(6),
      ` ${(confidence ?? '-').padEnd(10)}`,
      ` ${objectClass ?? '-'}`,
    ].join(' '),
  );
  return [head, ...lines, `${rows.length} spectra measured`, ''].join('\n');
}
