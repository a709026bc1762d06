import { expect, test } from 'vitest';
import { formObject } from '../../../src/lib/schemas/form-object';
import { filledRows, fieldsObject } from '../../../src/lib/schemas/form-rows';

function form(...fields: readonly (readonly [string, string])[]): FormData {
  const data = new FormData();
  for (const [name, value] of fields) data.append(name, value);
  return data;
}

test('dotted names become objects, numbered ones lists in their order', () => {
  const sent = form(
    ['title', 'T'],
    ['rows.1.name', 'b'],
    ['rows.0.name', 'a'],
    ['rows.10.name', 'c'],
    ['map.x', '1']
  );
  expect(formObject(sent)).toEqual({
    title: 'T',
    rows: [{ name: 'a' }, { name: 'b' }, { name: 'c' }],
    map: { x: '1' }
  });
});

test('a name sent several times becomes a list of its values', () => {
  expect(formObject(form(['left', 'a'], ['left', 'b'], ['one', 'c']))).toEqual({
    left: ['a', 'b'],
    one: 'c'
  });
});

test('names that reach for the prototype are left out', () => {
  const sent = formObject(
    form(['__proto__.polluted', 'yes'], ['a.constructor.b', 'yes'], ['a.c', 'kept'], ['a..b', 'no'])
  );
  expect(sent).toEqual({ a: { c: 'kept' } });
  expect(Reflect.get({}, 'polluted')).toBeUndefined();
});

test('rows left empty are passed over, others keep their order', () => {
  const { rows } = fieldsObject({
    'rows.0.name': ' ',
    'rows.0.kind': 'x',
    'rows.1.name': 'B',
    'rows.2.name': '',
    'rows.3.name': 'D'
  });
  expect(filledRows(rows, 'name').map(({ name }) => name)).toEqual(['B', 'D']);
  expect(filledRows(undefined, 'name')).toEqual([]);
});
