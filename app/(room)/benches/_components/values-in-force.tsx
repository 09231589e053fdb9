import { Quantity } from '@/components/figures/quantity';
import type { SetupView } from '@/lib/domain/views';
import { formatCalendarDate, formatNumber, placesFor } from '@/lib/quantity/format';
import { SETUP_VALUES } from '@/lib/domain/setup';

const TONE_WORDS = { auto: 'found from the frame', linear: 'linear', srgb: 'sRGB' } as const;

export function ValuesInForce({ setup }: { setup: SetupView }) {
  return (
    <section aria-labelledby="values">
      <div className="cap">
        <h2 id="values">Values in force</h2>
        <span>k = 2</span>
      </div>
      <table className="figures vals">
        <thead className="only-heard">
          <tr>
            <th scope="col">What</th>
            <th scope="col">Value</th>
            <th scope="col">Due</th>
          </tr>
        </thead>
        <tbody>
          {SETUP_VALUES.map(({ key, name, symbol, unit }) => {
            const value = setup[key];
            return (
              <tr key={key}>
                <td>
                  {name} <span className="sym">{symbol}</span>
                </td>
                <td className="num">
                  <Quantity value={value.value} expanded={2 * value.u} unit={unit} size="cell" />
                </td>
                <td className="due">{value.due ? `due ${formatCalendarDate(value.due)}` : 'no due date'}</td>
              </tr>
            );
          })}
          <tr>
            <td>Re-mount</td>
            <td className="num">
              {setup.remountNm ? (
                <Quantity
                  value={setup.remountNm.u}
                  expanded={null}
                  places={placesFor(setup.remountNm.u)}
                  unit="nm"
                  size="cell"
                />
              ) : (
                'none stated'
              )}
            </td>
            <td className="due">
              {setup.remountNm
                ? `k = 1${setup.remountNm.dof === null ? '' : `, ${formatNumber(setup.remountNm.dof, 0)} degrees of freedom`}`
                : ''}
            </td>
          </tr>
          <tr>
            <td>Camera’s tone</td>
            <td className="num">{TONE_WORDS[setup.tone]}</td>
            <td className="due" />
          </tr>
        </tbody>
      </table>
    </section>
  );
}
