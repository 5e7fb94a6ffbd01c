import type { Tariff } from '../../server/tariff/tariff.ts';
import { sentence } from '../format.ts';
import { Exhibit } from '../parts/Exhibit.tsx';
import { Table } from '../parts/Table.tsx';
import { WEEK, weekOfPrices } from './weekOfPrices.ts';

const CELL = 18;
const LEFT = 38;

/** A week of prices in each season, dear hours darker. */
export function PricesPicture({ tariff }: { readonly tariff: Tariff }) {
  const weeks = weekOfPrices(tariff);
  const prices = [...new Set(weeks.flatMap(({ days }) => days.flat()).filter((price) => price !== null))].sort(
    (a, b) => a - b,
  );
  const [least, most] = [prices[0] ?? 0, prices.at(-1) ?? 0];
  const shade = (price: number | null) => {
    if (price === null) return 'var(--warm)';
    const share = most > least ? (price - least) / (most - least) : 0.5;
    return `color-mix(in srgb, var(--count-last) ${Math.round(100 * share)}%, var(--count-first))`;
  };
  const title =
    least === most
      ? `A kWh costs ${most} ${tariff.currency} at all times`
      : `A kWh costs from ${least} to ${most} ${tariff.currency}`;
  return (
    <Exhibit
      title={title}
      level={2}
      numbers={() => (
        <Table
          caption="Prices of a kWh, in the order in which they are looked for"
          rows={tariff.energy}
          keyOf={(rate) => rate.name}
          name={{ head: 'Name', cell: (rate) => rate.name }}
          columns={[
            { head: 'Season', cell: (rate) => rate.season ?? 'all year' },
            { head: 'Price', unit: tariff.currency, cell: (rate) => String(rate.rate) },
          ]}
        />
      )}
    >
      {weeks.map(({ season, days }) => (
        <div key={season} class="week">
          {season !== null && <p class="label">{sentence(season)}</p>}
          <svg
            class="map"
            viewBox={`0 0 ${LEFT + 24 * CELL} ${7 * CELL + 20}`}
            role="img"
            aria-label={`${title}${season ? `, ${season}` : ''}`}
          >
            {days.map((hours, day) => (
              <g key={WEEK[day]} transform={`translate(0 ${day * CELL})`}>
                <text x="0" y={CELL / 2} dy="0.35em">
                  {WEEK[day]}
                </text>
                {hours.map((price, hour) => (
                  <rect
                    key={hour}
                    x={LEFT + hour * CELL}
                    width={CELL - 1}
                    height={CELL - 1}
                    style={{ fill: shade(price) }}
                  >
                    <title>{`${WEEK[day]} ${hour}:00, ${price === null ? 'no price' : `${price} ${tariff.currency}`}`}</title>
                  </rect>
                ))}
              </g>
            ))}
            {[0, 6, 12, 18].map((hour) => (
              <text key={hour} x={LEFT + hour * CELL} y={7 * CELL + 15}>
                {`${hour}:00`}
              </text>
            ))}
          </svg>
        </div>
      ))}
      <ul class="ledger-key">
        {prices.map((price) => (
          <li key={price}>
            <i style={{ background: shade(price) }} /> {price} {tariff.currency}
          </li>
        ))}
      </ul>
    </Exhibit>
  );
}
