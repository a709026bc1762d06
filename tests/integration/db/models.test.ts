import { readdirSync } from 'node:fs';
import type { ModelStatic, Model } from 'sequelize';
import { QueryTypes } from 'sequelize';
import { expect, test } from 'vitest';
import { sequelize } from '../../../src/lib/server/db/sequelize';

const folder = new URL('../../../src/lib/server/db/models/', import.meta.url);

async function allModels(): Promise<ModelStatic<Model>[]> {
  for (const file of readdirSync(folder)) await import(new URL(file, folder).href);
  return Object.values(sequelize.models);
}

test('every table of the schema has a model with the same columns', async () => {
  const models = await allModels();
  const columns = await sequelize.query<{ table_name: string; column_name: string; is_nullable: string }>(
    `SELECT table_name, column_name, is_nullable FROM information_schema.columns
      WHERE table_schema = 'public' AND table_name NOT LIKE 'Sequelize%'`,
    { type: QueryTypes.SELECT }
  );
  const inDatabase = new Set(columns.map(({ table_name, column_name }) => `${table_name}.${column_name}`));
  const inModels = new Set(
    models.flatMap((model) =>
      Object.values(model.getAttributes()).map((attribute) => `${model.tableName}.${attribute.field}`)
    )
  );
  expect([...inModels].filter((name) => !inDatabase.has(name))).toEqual([]);
  expect([...inDatabase].filter((name) => !inModels.has(name))).toEqual([]);
});
