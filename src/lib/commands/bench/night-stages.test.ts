import { expect, it } from 'vitest';
import { sumStages } from './night-stages';

it('adds up the stages of jobs and passes other lines over', () => {
  const log = [
    '{"level":30,"msg":"worker is up"}',
    '{"level":20,"stages":{"reading":2,"engine":80.5,"inserting":7},"msg":"files taken"}',
    '{"level":20,"stages":{"reading":3,"engine":70,"inserting":5},"msg":"files taken"}',
    '{"level":20,"stages":{"readi',
    '',
  ].join('\n');
  expect(sumStages(log)).toEqual({ jobs: 2, reading: 5, engine: 150.5, inserting: 12 });
});
