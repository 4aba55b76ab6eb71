import { config } from '../config/config';
import { FolderStorage } from './folder-storage';
import type { ObjectStore } from './object-store';

let storage: ObjectStore | undefined;

/** The storage this installation is set to use. */
export function objects(): ObjectStore {
  storage ??= new FolderStorage(config().STORAGE_DIR);
  return storage;
}
