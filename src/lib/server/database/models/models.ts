import type { Sequelize } from 'sequelize';
import { defineAnswers } from './answers';
import { defineObserving } from './observing';
import { definePeople } from './people';
import { definePublishing } from './publishing';
import { defineTogether } from './together';

/** Binds every model to a connection. Called once by `database()`. */
export function defineModels(sequelize: Sequelize): void {
  definePeople(sequelize);
  defineObserving(sequelize);
  defineAnswers(sequelize);
  definePublishing(sequelize);
  defineTogether(sequelize);
}
