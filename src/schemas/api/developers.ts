/** What the page of the API shows of one operation, made of the OpenAPI document. */

export interface FieldShown {
  name: string;
  /** path, query, header or body; in an answer empty. */
  where: string;
  required: boolean;
  /** "text", "one of a, b", "list of Site". */
  type: string;
  words: string;
}
export interface OperationShown {
  id: string;
  group: string;
  method: string;
  path: string;
  summary: string;
  words: string;
  scope: string | null;
  takes: FieldShown[];
  answers: { status: string; words: string; type: string; fields: FieldShown[] }[];
  curl: string;
}
