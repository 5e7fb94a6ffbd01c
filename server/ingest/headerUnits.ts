import { FLOW_UNITS, FOOT, HEAD_UNITS, INCH, POWER_UNITS, US_GALLON } from '../units.ts';

/** What a header cell says: the quantity's name in plain lower case, and the unit written with it. */
export interface HeaderName {
  /** As the file has it, for messages. */
  readonly title: string;
  /** Lower case, one blank between words, without the unit. */
  readonly name: string;
  /** The whole cell in the same spelling, unit and all. */
  readonly whole: string;
  /** The unit's text as written, or null. */
  readonly unit: string | null;
}

export type Quantity = 'flow' | 'head' | 'power' | 'share';

/** SI value of one unit, by the spellings seen in headers (lower case, no blanks). US gallons, as everywhere here. */
const UNITS: Readonly<Record<Quantity, ReadonlyMap<string, number>>> = {
  flow: spellings([
    [FLOW_UNITS['m3/s'], 'm3/s m3s m3/sec m3s-1 cms cumec cumecs cubicmetrespersecond'],
    [FLOW_UNITS['m3/h'], 'm3/h m3h m3/hr m3/hour m3h-1 m3ph cmh cum/h cbm/h cubicmetresperhour'],
    [FLOW_UNITS['L/s'], 'l/s lps ls l/sec ls-1 litres/s liters/s litrespersecond literspersecond'],
    [FLOW_UNITS['ML/d'], 'ml/d mld ml/day megalitres/day megalitresperday'],
    [FLOW_UNITS.gpm, 'gpm usgpm gal/min usgal/min gallons/min gallonsperminute'],
    [FLOW_UNITS.MGD, 'mgd usmgd mgal/d mgal/day'],
    [1e-3 / 60, 'l/min lpm litres/min liters/min'],
    [1e-3 / 3600, 'l/h lph l/hr'],
    [1 / 60, 'm3/min m3min'],
    [1 / 86_400, 'm3/d m3d m3/day cmd kl/d kld'],
    [FOOT ** 3, 'cfs ft3/s cuft/s'],
    [US_GALLON / 3600, 'gph gal/h'],
    [US_GALLON / 86_400, 'gpd gal/d'],
  ]),
  head: spellings([
    [HEAD_UNITS.m, 'm metre metres meter meters mh2o mwc mwg maod mod mahd'],
    [HEAD_UNITS.ft, 'ft feet foot fth2o'],
    [0.01, 'cm'],
    [0.001, 'mm'],
    [INCH, 'in inch inches'],
  ]),
  power: spellings([
    [POWER_UNITS.kW, 'kw kilowatt kilowatts'],
    [POWER_UNITS.hp, 'hp bhp'],
    [1, 'w watt watts'],
    [1e6, 'mw megawatt'],
  ]),
  share: spellings([
    [1, '- 1 share ratio pu p.u. fraction'],
    [0.01, '% percent pct'],
  ]),
};

/** Words in brackets after a name that are not units. */
const NOT_UNITS =
  /^(?:avg|average|mean|min|max|raw|calc(?:ulated)?|measured|meter(?:ed)?|actual|pv|value|total|instant(?:aneous)?)$/i;

function spellings(rows: readonly (readonly [number, string])[]): ReadonlyMap<string, number> {
  return new Map(rows.flatMap(([factor, names]) => names.split(' ').map((name) => [name, factor] as const)));
}

/** SI value of one unit as a header spells it, or null where the spelling is not known for that quantity. */
export function unitFactor(quantity: Quantity, unit: string): number | null {
  const plain = unit
    .toLowerCase()
    .replace(/[\u00b3]|\^3|\*\*3/g, '3')
    .replace(/[\u207b]\u00b9|\^-1/g, '-1')
    .replace(/[\s\u00b7._]+/g, '')
    .replace(/per(?=s$|h$|d$)/, '/')
    .replace(/^\[(.*)\]$|^\((.*)\)$/, '$1$2');
  return UNITS[quantity].get(plain) ?? null;
}

/** Splits a header cell such as `Flow [L/s]`, `inflow_m3h`, `Level, ft` or `flow in gpm` into name and unit. */
export function readHeader(title: string): HeaderName {
  const clean = title.replace(/^[\s#%"'\uFEFF]+|^\/\/|["'\s]+$/g, '').trim();
  const whole = plainName(clean);
  const bracket = /^(.*?)\s*[([{]([^()[\]{}]*)[)\]}]$/.exec(clean);
  if (bracket !== null && plainName(bracket[1]!) !== '') {
    const inside = bracket[2]!.trim();
    return {
      title,
      name: plainName(bracket[1]!),
      whole,
      unit: inside === '' || NOT_UNITS.test(inside) ? null : inside,
    };
  }
  for (const pattern of [
    /^(.+?),\s*(\S+)$/,
    /^(.+?)\s+in\s+(\S+)$/i,
    /^(.+?)[\s_]+(\S+?[\s_]\S+)$/,
    /^(.+)[\s_]+(\S+)$/,
  ]) {
    const match = pattern.exec(clean);
    if (match === null) continue;
    const unit = match[2]!.replace(/^(m3|l|ml)[_ ](s|h|d)$/i, '$1/$2');
    if ((['flow', 'head', 'power'] as const).some((quantity) => unitFactor(quantity, unit) !== null)) {
      return { title, name: plainName(match[1]!), whole, unit };
    }
  }
  return { title, name: whole, whole, unit: null };
}

/** Lower case with one blank for every run of blanks, underscores and the like: `Static_Head` → `static head`. */
export function plainName(text: string): string {
  return text
    .toLowerCase()
    .replace(/[\s_/.:-]+/g, ' ')
    .trim();
}
