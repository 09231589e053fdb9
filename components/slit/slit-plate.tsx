import { SaidCheck } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import type { SetupValues } from '@/lib/domain/reading-result';
import type { FitResult } from '@/lib/domain/scan-result';
import { formatNumber, formatQuantity, formatSigned, placesFor } from '@/lib/quantity/format';
import { slitPlate, type AgainstPlate, type SlitLength } from '@/lib/quantity/slit-mode';

interface Props {
  result: FitResult;
  setup: SetupValues;
  source: { vacuumNm: number; uNm: number };
}

/** The light is known here, so the frame measures the plate: separation and width against what the setup states of it. */
export function SlitPlate({ result, setup, source }: Props) {
  const plate = slitPlate(result, setup, source);
  if (!plate) return null;
  const { separation, width } = plate;
  return (
    <div className="sec">
      <div className="cap" style={{ marginBottom: 5 }}>
        <h2>The plate under this light</h2>
        <span>k = {formatNumber(separation.k, 2)}</span>
      </div>
      <dl className="plate-found">
        <Line name="Separation" symbol="d" length={separation} against={plate.separationAgainst} />
        {width ? (
          <Line name="Width" symbol="w" length={width} against={plate.widthAgainst} />
        ) : (
          <>
            <dt>
              Width <span className="sym">w</span>
            </dt>
            <dd>not from this frame</dd>
          </>
        )}
      </dl>
      <p className="budget-note">
        From the published wavelength, distance, scale and spacing; the separation stated in the setup does
        not enter. {largestText(separation)}
      </p>
    </div>
  );
}

interface LineProps {
  name: string;
  symbol: string;
  length: SlitLength;
  against: AgainstPlate | null;
}

function Line({ name, symbol, length, against }: LineProps) {
  return (
    <>
      <dt>
        {name} <span className="sym">{symbol}</span>
      </dt>
      <dd>
        <Quantity value={length.valueUm} expanded={length.expandedUm} unit="µm" size="cell" />
      </dd>
      {against ? (
        <dd className="against">
          <SaidCheck word={against.inside ? 'clear' : 'look'}>
            {against.inside ? 'As the setup states' : 'Not what the setup states'}
          </SaidCheck>
          <span>{againstText(against)}</span>
        </dd>
      ) : null}
    </>
  );
}

function againstText({ deviationUm, expandedUm }: AgainstPlate): string {
  const { uncertainty } = formatQuantity(0, expandedUm);
  return `${formatSigned(deviationUm, placesFor(expandedUm))} ± ${uncertainty} µm`;
}

/** "Largest part: distance, 61 %." */
function largestText({ budget }: SlitLength): string {
  const [first] = [...budget].sort((a, b) => b.share - a.share);
  return first ? `Largest part: ${first.name.toLowerCase()}, ${formatNumber(100 * first.share, 0)} %.` : '';
}
