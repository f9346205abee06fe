/** Lists of a result whose items are sentences, with the catalogue's prefix of their keys. */
export const MESSAGE_LISTS = { cautions: 'caution', warnings: 'warning', policies: 'policy' } as const;
type MessageList = keyof typeof MESSAGE_LISTS;

export type MessageParams = Readonly<Record<string, string | number>>;

type UnsaidItem<Item> = Item extends { message: string } ? Omit<Item, 'message'> & { params: MessageParams } : Item;

/** A response before its sentences are chosen: `params` for the catalogue's text in place of `message`. */
export type Unsaid<Response> = Response extends object
  ? {
      [Key in keyof Response]: Key extends MessageList
        ? Response[Key] extends readonly (infer Item)[]
          ? readonly UnsaidItem<Item>[]
          : Response[Key]
        : Response[Key];
    }
  : Response;

/**
 * Fills in the sentences: `{ code, signal, params }` becomes `{ code, signal, message }`. The caller knows the language:
 * `say` gets a key of the catalogue, such as `caution.flammableFillLimit`.
 */
export function sayMessages<Result>(result: Result, say: (key: string, params: MessageParams) => string): unknown {
  if (typeof result !== 'object' || result === null) return result;
  return Object.fromEntries(
    Object.entries(result).map(([name, value]) => {
      const prefix = MESSAGE_LISTS[name as MessageList];
      if (!prefix || !Array.isArray(value)) return [name, value];
      return [name, value.map((item) => said(item as SayableItem, prefix, say))];
    }),
  );
}

interface SayableItem {
  code: string;
  params?: MessageParams;
}

function said(item: SayableItem, prefix: string, say: (key: string, params: MessageParams) => string) {
  const { params, ...rest } = item;
  return { ...rest, message: say(`${prefix}.${item.code}`, params ?? {}) };
}
