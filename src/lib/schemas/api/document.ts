import { z } from 'zod';
import { apiSchemas } from './describe';
import { operations, type Operation } from './operations';
import './problem';

type Json = Readonly<Record<string, unknown>>;

const pointer = (id: string): string => `#/components/schemas/${id}`;

/** Answers may gain members, and "readOnly" means something else in an API than in a type. */
function plain(schema: Json): Json {
  const { $schema: _dialect, $id: _id, ...rest } = schema;
  return rest;
}

const opened = {
  override: ({ jsonSchema }: { jsonSchema: Record<string, unknown> }): void => {
    if (jsonSchema.additionalProperties === false) delete jsonSchema.additionalProperties;
    delete jsonSchema.readOnly;
    // The ends of what a number can hold exactly say nothing to a reader.
    if (jsonSchema.minimum === Number.MIN_SAFE_INTEGER) delete jsonSchema.minimum;
    if (jsonSchema.maximum === Number.MAX_SAFE_INTEGER) delete jsonSchema.maximum;
  }
};

function componentSchemas(): Json {
  const { schemas } = z.toJSONSchema(apiSchemas, { uri: pointer, ...opened });
  return Object.fromEntries(Object.entries(schemas).map(([id, schema]) => [id, plain(schema as Json)]));
}

/** A schema by its name where it has one. */
function schemaOf(schema: z.ZodType): Json {
  const id = apiSchemas.get(schema)?.id;
  return id === undefined ? plain(z.toJSONSchema(schema, opened) as Json) : { $ref: pointer(id) };
}

const parameterTexts: Readonly<Record<string, string>> = {
  study: 'Code of the study; capitals do not count.',
  experiment: 'Number of the experiment.',
  import: 'Id of the import.'
};

/** "/api/v1/studies/[study]" as "/api/v1/studies/{study}". */
export const openApiPath = (routeId: string): string => routeId.replace(/\[([a-z]+)\]/gi, '{$1}');

function pathParameters(routeId: string): readonly Json[] {
  return [...routeId.matchAll(/\[([a-z]+)\]/gi)].map(([, name = '']) => ({
    name,
    in: 'path',
    required: true,
    description: parameterTexts[name] ?? '',
    schema: { type: 'string' }
  }));
}

function queryParameters(query: z.ZodObject | undefined): readonly Json[] {
  if (!query) return [];
  const { properties = {}, required = [] } = z.toJSONSchema(query, { io: 'input' });
  return Object.entries(properties).map(([name, schema]) => {
    const { description, ...rest } = schema as Json & { readonly description?: string };
    return {
      name,
      in: 'query',
      required: required.includes(name),
      ...(description === undefined ? {} : { description }),
      schema: rest
    };
  });
}

const commonFailures: Readonly<Record<number, string>> = {
  401: 'No key came with the request, or one that does not work.',
  403: 'The role of the key’s person, or the scope of the key, does not include this.',
  429: 'Too many requests; Retry-After tells how many seconds to wait.'
};

const problemContent = { 'application/problem+json': { schema: { $ref: pointer('Problem') } } };

function responses({ answers, failures, scope }: Operation): Json {
  const good = Object.entries(answers).map(([status, { description, content }]) => [
    status,
    {
      description,
      content: Object.fromEntries(
        Object.entries(content).map(([type, schema]) => [
          type,
          schema === 'file' ? { schema: { type: 'string', format: 'binary' } } : { schema: schemaOf(schema) }
        ])
      )
    }
  ]);
  const bad = Object.entries({ ...(scope === null ? {} : commonFailures), ...failures }).map(
    ([status, description]) => [status, { description, content: problemContent }]
  );
  return Object.fromEntries([...good, ...bad]);
}

const fileBody: Json = {
  required: true,
  content: {
    'application/octet-stream': { schema: { type: 'string', format: 'binary' } },
    'multipart/form-data': {
      schema: {
        type: 'object',
        required: ['file'],
        properties: { file: { type: 'string', format: 'binary', description: 'The file with its name.' } }
      }
    }
  }
};

function operationObject(operation: Operation): Json {
  const { routeId, operationId, summary, description, scope, query, takesFile } = operation;
  return {
    operationId,
    summary,
    ...(description === undefined ? {} : { description }),
    parameters: [...pathParameters(routeId), ...queryParameters(query)],
    ...(takesFile ? { requestBody: fileBody } : {}),
    responses: responses(operation),
    security: scope === null ? [] : [{ accessKey: [scope] }]
  };
}

/**
 * The OpenAPI 3.1 description of the API, made from the schemas that requests are checked with and answers are tested with.
 */
export function apiDocument(): Json {
  const paths: Record<string, Record<string, Json>> = {};
  for (const operation of operations) {
    (paths[openApiPath(operation.routeId)] ??= {})[operation.method] = operationObject(operation);
  }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Headwater',
      // Of the API: its first number is the one in the addresses.
      version: '1.0.0',
      description:
        'Studies of extraction methods, their data files and their recoveries. Signed by an access key, which a member makes on the page "Access keys" of the lab. Amounts in ng, volumes in mL, concentrations in ng/mL, recoveries in percent, differences in percentage points, times in UTC.'
    },
    servers: [{ url: '/' }],
    paths,
    components: {
      securitySchemes: {
        accessKey: {
          type: 'http',
          scheme: 'bearer',
          description:
            'An access key. Scopes: read (every GET), import (bringing files in). It acts as the person who made it, with the role that person has at that moment.'
        }
      },
      schemas: componentSchemas()
    }
  };
}
