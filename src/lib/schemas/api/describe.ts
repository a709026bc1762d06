import { z } from 'zod';

/** Names of the schemas that stand by themselves in the published description. */
export const apiSchemas = z.registry<{ id: string }>();

type Same<One, Other> = [One] extends [Other] ? ([Other] extends [One] ? unknown : never) : never;

/**
 * Names a response schema, and holds it against the type of the view that is sent: a schema that says more, less or
 * something else does not compile.
 */
export const describes =
  <View>() =>
  <Schema extends z.ZodType>(id: string, schema: Schema & Same<z.infer<Schema>, View>): Schema => {
    apiSchemas.add(schema, { id });
    return schema;
  };

/** A list whose type is read-only, as in the views. */
export const list = <Item extends z.ZodType>(item: Item) => z.array(item).readonly();

/** Members beyond those listed are refused, so that a test notices what is sent and not described. */
export const object = z.strictObject;

export const text = z.string();
export const number = z.number();
export const whole = z.number().int();
export const moment = z.iso.datetime({ offset: true }).meta({ description: 'ISO 8601, UTC.' });
export const day = z.string().meta({ description: 'ISO 8601 calendar day.' });
export const hrefOfFigure = z
  .string()
  .meta({ description: 'Address below this server at which the figure opens: where it comes from.' });
