import type { FieldShown, OperationShown } from '../../schemas/api/developers';
import { curlOf, type ExampleValues } from './curl';
import { openApiDocument } from './document';
import { OPERATIONS } from './operations';

/** The OpenAPI document as a person reads it: each operation with what it takes and what it answers. */

interface JsonSchema {
  $ref?: string;
  type?: string | string[];
  enum?: unknown[];
  const?: unknown;
  anyOf?: JsonSchema[];
  oneOf?: JsonSchema[];
  items?: JsonSchema;
  prefixItems?: JsonSchema[];
  properties?: Record<string, JsonSchema>;
  required?: string[];
  additionalProperties?: JsonSchema | boolean;
  format?: string;
  default?: unknown;
  minimum?: number;
  maximum?: number;
  description?: string;
}
interface Param {
  $ref?: string;
  name?: string;
  in?: string;
  required?: boolean;
  description?: string;
  schema?: JsonSchema;
}
interface DocumentOperation {
  parameters?: Param[];
  requestBody?: { content: Record<string, { schema: JsonSchema }> };
  responses: Record<string, { description: string; content?: Record<string, { schema?: JsonSchema }> }>;
}
interface Document {
  paths: Record<string, Record<string, DocumentOperation>>;
  components: { schemas: Record<string, JsonSchema>; parameters: Record<string, Param> };
}

const nameOf = (ref: string): string => ref.split('/').at(-1) ?? '';
const PLAIN: Record<string, string> = {
  string: 'text',
  integer: 'whole number',
  number: 'number',
  boolean: 'true or false',
  object: 'object',
  null: 'null',
};
const FORMAT: Record<string, string> = { uuid: 'UUID', 'date-time': 'time', date: 'day' };
/** So many of an enumeration stand in a row; the rest is in the document. */
const FEW = 12;

/** A schema in a few words. */
export function typeWords(schema: JsonSchema | undefined): string {
  if (!schema) return '';
  if (schema.$ref) return nameOf(schema.$ref);
  const many = schema.anyOf ?? schema.oneOf;
  if (many) return [...new Set(many.map(typeWords))].join(' or ');
  if (schema.const !== undefined) return String(schema.const);
  if (schema.enum) {
    const words = schema.enum.slice(0, FEW).map(String).join(', ');
    return `one of ${words}${schema.enum.length > FEW ? `, and ${schema.enum.length - FEW} more` : ''}`;
  }
  if (schema.type === 'array') return `list of ${typeWords(schema.items) || 'anything'}`;
  if (schema.format && FORMAT[schema.format]) return FORMAT[schema.format] ?? '';
  const members = Object.keys(schema.properties ?? {});
  if (members.length > 0) return `{ ${members.join(', ')} }`;
  const types = [schema.type ?? []].flat();
  return types.map((t) => PLAIN[t] ?? t).join(' or ') || 'anything';
}

function limitsOf(schema: JsonSchema | undefined): string[] {
  const low = schema?.minimum;
  const high = schema?.maximum;
  const huge = (n: number) => Math.abs(n) >= Number.MAX_SAFE_INTEGER;
  return [
    ...(low !== undefined && high !== undefined && !huge(low) && !huge(high) ? [`${low} to ${high}`] : []),
    ...(schema?.default === undefined || schema.default === null || schema.default === ''
      ? []
      : [`${JSON.stringify(schema.default).replaceAll('"', '')} if left out`]),
  ];
}
const wordsOf = (description: string | undefined, schema: JsonSchema | undefined): string =>
  [description ?? schema?.description ?? '', ...limitsOf(schema)].filter(Boolean).join('; ');

class Reader {
  constructor(private readonly document: Document) {}

  private resolved(schema: JsonSchema | undefined): JsonSchema | undefined {
    return schema?.$ref ? this.document.components.schemas[nameOf(schema.$ref)] : schema;
  }

  /** The members of an object; of a page or a list those of its items. */
  fields(schema: JsonSchema | undefined, where = ''): FieldShown[] {
    const whole = this.resolved(schema);
    if (whole?.type === 'array') return this.fields(whole.items, where);
    const items = whole?.properties?.data?.items;
    if (where === '' && items) return this.fields(items);
    return Object.entries(whole?.properties ?? {}).map(([name, member]) => ({
      name,
      where,
      required: whole?.required?.includes(name) ?? false,
      type: typeWords(member),
      words: wordsOf(undefined, member),
    }));
  }

  takes(operation: DocumentOperation): FieldShown[] {
    const parameters = (operation.parameters ?? []).map(
      (p) => (p.$ref ? this.document.components.parameters[nameOf(p.$ref)] : p) ?? p,
    );
    return [
      ...parameters.map((p) => ({
        name: p.name ?? '',
        where: p.in ?? '',
        required: p.required ?? false,
        type: typeWords(p.schema),
        words: wordsOf(p.description, p.schema),
      })),
      ...this.fields(operation.requestBody?.content['application/json']?.schema, 'body'),
    ];
  }

  answers(operation: DocumentOperation): OperationShown['answers'] {
    return Object.entries(operation.responses).map(([status, { description, content }]) => {
      const good = Number(status) < 300;
      const schema = Object.values(content ?? {})[0]?.schema;
      const one = schema?.anyOf?.[0] ?? schema;
      return {
        status,
        words: description,
        type: good ? Object.keys(content ?? {}).join(' or ') : '',
        fields: good ? this.fields(one) : [],
      };
    });
  }
}

let document: Document | undefined;
const plain = (): Document => (document ??= JSON.parse(JSON.stringify(openApiDocument())) as Document);

/**
 * Every operation that a token can ask for.
 * @param origin of the site, as the reader reaches it
 * @param newRef a new identifier for what an example writes
 */
export function operationsShown(
  origin: string,
  values: Omit<ExampleValues, 'ref'>,
  newRef: () => string,
): OperationShown[] {
  const reader = new Reader(plain());
  return OPERATIONS.flatMap((o) => {
    const documented = plain().paths[o.path]?.[o.method.toLowerCase()];
    return documented
      ? [
          {
            id: o.id,
            group: o.group,
            method: o.method,
            path: o.path,
            summary: o.summary,
            words: o.description,
            scope: o.scope,
            takes: reader.takes(documented),
            answers: reader.answers(documented),
            curl: curlOf(o, origin, { ...values, ref: newRef() }),
          },
        ]
      : [];
  });
}
