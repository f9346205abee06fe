/** What can be brought in from a table, and which columns each takes. */
export const IMPORT_KINDS = ['units', 'cylinders', 'entries'] as const;
export type ImportKind = (typeof IMPORT_KINDS)[number];

export interface ImportField {
  name: string;
  required: boolean;
  /** What a column's head may say, in English and Spanish, without accents and in small letters. Whole heads. */
  heads: readonly string[];
}

const field = (name: string, heads: string, required = false): ImportField => ({
  name,
  required,
  heads: [name.toLowerCase(), ...heads.split('|')],
});

const REFRIGERANT = 'refrigerant|gas|refrigerante';
const TAG_OF_UNIT = 'unit|unit tag|tag|number|id|asset|unidad|numero|etiqueta|equipo';
const TAG_OF_CYLINDER = 'cylinder|cylinder tag|tag|number|collar|cilindro|bombona|botella|numero|etiqueta';
const CONTENT = 'content|contents|net|net content|opening|holds|contenido|neto|saldo inicial';
const CONTENT_ON = 'content on|as of|opening date|counted on|contado el|fecha de saldo|a fecha de';

export const IMPORT_FIELDS: Readonly<Record<ImportKind, readonly ImportField[]>> = {
  units: [
    field('tag', TAG_OF_UNIT, true),
    field('site', 'site|location|address|sitio|lugar|ubicacion|obra', true),
    field('customer', 'client|customer name|cliente'),
    field('name', 'description|where|room|nombre|descripcion|sala'),
    field('applianceKind', 'appliance kind|kind|type|class|clase|tipo'),
    field('refrigerant', REFRIGERANT, true),
    field('installedOn', 'installed|installed on|installation date|instalado|instalado el|fecha de instalacion'),
    field('serial', 'serial number|serial no|s/n|numero de serie|serie'),
    field('model', 'model number|modelo'),
    field('fullCharge', 'full charge|charge|total charge|carga|carga total|carga completa'),
    field('fullChargeMethod', 'method|full charge method|metodo'),
    field('content', CONTENT),
    field('contentOn', CONTENT_ON),
  ],
  cylinders: [
    field('tag', TAG_OF_CYLINDER, true),
    field('kind', 'type|cylinder kind|tipo|clase', true),
    field('refrigerant', REFRIGERANT, true),
    field('contentState', 'state|content state|estado'),
    field('owner', 'belongs to|rented from|dueno|propietario|de'),
    field('tare', 'tare weight|tw|tara', true),
    field('tareFrom', 'tare from|tare date|tara desde'),
    field('waterCapacity', 'water capacity|wc|capacidad de agua|capacidad'),
    field('stampedLimit', 'limit|fill limit|stamped limit|limite|limite de llenado'),
    field('retestDue', 'retest|re-test|retest due|re-test by|test date|reprueba|proxima prueba'),
    field('heldBy', 'held by|who has it|technician|van|lo tiene|tecnico|furgoneta'),
    field('batch', 'lot|lote'),
    field('content', CONTENT),
    field('contentOn', CONTENT_ON),
  ],
  entries: [
    field('occurredAt', 'date|when|day|time|occurred at|fecha|cuando|dia', true),
    field('what', 'kind|type|action|operation|tipo|accion|operacion|que', true),
    field('mass', 'amount|quantity|weight|masa|cantidad|peso', true),
    field('refrigerant', REFRIGERANT),
    field('unit', 'unit tag|asset|appliance|unidad|equipo'),
    field('site', 'location|sitio|lugar|ubicacion'),
    field('cylinder', 'cylinder tag|from cylinder|cilindro|bombona|botella'),
    field('toCylinder', 'to cylinder|into cylinder|recovery cylinder|al cilindro|cilindro de recuperacion'),
    field('party', 'supplier|reclaimer|from or to|proveedor|regenerador'),
    field('howKnown', 'how known|source|known by|sabido por|fuente'),
    field('note', 'notes|remark|comment|nota|notas|observaciones'),
  ],
};

/** Words for what stands in a cell of a closed list; the list's own names are always taken. */
export const CELL_WORDS: Readonly<Record<string, Readonly<Record<string, string>>>> = {
  kind: {
    refillable: 'refillable|returnable|recargable|rellenable|retornable',
    nonRefillable: 'non-refillable|non refillable|nonrefillable|disposable|no recargable|no rellenable|desechable',
    recovery: 'recovery|recovery cylinder|recuperacion|de recuperacion',
  },
  contentState: {
    virgin: 'virgin|new|virgen|nuevo',
    recovered: 'recovered|recuperado',
    recycled: 'recycled|reciclado',
    reclaimed: 'reclaimed|regenerado',
  },
  applianceKind: {
    comfortCooling: 'comfort cooling|comfort|air conditioning|ac|a/c|confort|climatizacion|aire acondicionado',
    commercialRefrigeration: 'commercial refrigeration|commercial|refrigeracion comercial',
    industrialProcessRefrigeration: 'industrial process refrigeration|industrial|ipr|refrigeracion industrial',
    other: 'other|otro|otra',
  },
  fullChargeMethod: {
    manufacturer: 'manufacturer|nameplate|label|fabricante|placa',
    calculation: 'calculation|calculated|calculo|calculada',
    measured: 'measured|weighed|medida|pesada',
    establishedRange: 'established range|range|rango',
  },
  what: {
    purchase: 'purchase|bought|compra|comprado',
    opening: 'opening|opening balance|apertura|saldo inicial',
    extraCharge: 'extra charge|extra|carga adicional',
    fullRecharge: 'full recharge|recharge|recarga completa',
    refill: 'refill|charge|charged|added|addition|carga|recarga|anadido',
    recovery: 'recovery|recovered|recuperacion|recuperado',
    overchargeRemoved: 'overcharge removed|overcharge|exceso retirado',
    heelRemoved: 'heel removed|heel|resto retirado',
    transfer: 'transfer|trasvase|transferencia',
    weighing: 'weighing|weighed|scale|pesada|pesado',
    return: 'return|returned|devolucion|devuelto',
    reclaim: 'reclaim|sent to reclaimer|regeneracion',
    destruction: 'destruction|destroyed|destruccion',
    loss: 'loss|lost|perdida',
  },
  howKnown: {
    weighed: 'weighed|scale|pesado|bascula',
    estimated: 'estimated|estimate|estimado',
    invoice: 'invoice|factura',
    label: 'label|etiqueta',
    factory: 'factory|fabrica',
    certificate: 'certificate|certificado',
  },
};

/** Small letters, no accents, one blank between words: so that heads and words of a list compare. */
export const plainWords = (text: string): string =>
  text
    .normalize('NFD')
    .replace(/\p{Mn}/gu, '')
    .toLowerCase()
    .replace(/[\s_]+/g, ' ')
    .replace(/[.:*]+$/, '')
    .trim();

/** The name of the list for what a cell says, or null. */
export function wordOfCell(list: string, text: string): string | null {
  const wanted = plainWords(text);
  for (const [name, words] of Object.entries(CELL_WORDS[list] ?? {})) {
    if (wanted === name.toLowerCase() || words.split('|').includes(wanted)) return name;
  }
  return null;
}

/**
 * Which column each field is probably in, by the words of its head; a column serves one field. A unit in brackets behind
 * the head is left out of the comparison: `Tare (kg)`.
 */
export function guessColumns(kind: ImportKind, heads: readonly string[]): Record<string, number> {
  const free = heads.map((head) => plainWords(head.replace(/[([].*$/, '')));
  const found: Record<string, number> = {};
  const used = new Set<number>();
  // The field's first words are the closest: every field is tried by its first before any by its second.
  const longest = Math.max(...IMPORT_FIELDS[kind].map(({ heads: words }) => words.length));
  for (let word = 0; word < longest; word += 1) {
    for (const { name, heads: words } of IMPORT_FIELDS[kind]) {
      const wanted = words[word];
      const column = wanted === undefined ? -1 : free.findIndex((head, at) => head === wanted && !used.has(at));
      if (found[name] !== undefined || column < 0) continue;
      found[name] = column;
      used.add(column);
    }
  }
  return found;
}
