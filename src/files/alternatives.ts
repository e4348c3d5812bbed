/** Of a map that may stand for one of several things: what each must have, and may have besides. */
export interface Alternative {
  readonly must: readonly string[];
  readonly may: readonly string[];
}

interface Written {
  readonly properties: Readonly<Record<string, object>>;
  readonly required: string[];
  readonly propertyNames: { readonly enum: string[] };
}

/** For the JSON Schema of such a map: an editor then offers the keys that go with those that are there. */
export function exactlyOne(...alternatives: readonly Alternative[]): { readonly oneOf: Written[] } {
  return {
    oneOf: alternatives.map(({ must, may }) => ({
      properties: Object.fromEntries(must.map((key) => [key, {}])),
      required: [...must],
      propertyNames: { enum: [...must, ...may] },
    })),
  };
}
