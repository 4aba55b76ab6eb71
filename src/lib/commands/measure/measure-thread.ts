import { parentPort } from 'node:worker_threads';
import { measureFile, type MeasureTask } from './measure-file';

parentPort?.on('message', (task: MeasureTask) => {
  parentPort?.postMessage({ id: task.id, lines: measureFile(task) });
});
