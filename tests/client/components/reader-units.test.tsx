import { fireEvent, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useLocation } from 'react-router-dom';
import { afterEach, describe, expect, it } from 'vitest';
import type { ReaderUnits } from '#shared/reader-units.ts';
import { CropUnits, useUnitChoice } from '#src/chosen-units.tsx';
import { GapStrip, type GapStripRow } from '#src/components/gap-strip.tsx';
import { ReaderUnitsProvider } from '#src/components/reader-units-context.tsx';
import { UnitSwitch } from '#src/components/unit-switch.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useCautionItems } from '#src/use-caution-items.ts';
import { renderClient } from '#tests/client/support/render-client.tsx';

const bushels: ReaderUnits = { yieldUnit: 'bu/ac', bushelWeightLb: 60 };

const row: GapStripRow = {
  id: 'o',
  name: 'Ostermoor',
  verdict: 'ahead',
  estimate: 0.4,
  region: { low: 0.2, high: 0.6, level: 0.95 },
  ownSeason: { low: 0, high: 0.8, level: 0.95 },
  breakEven: 0.11,
};

/** Writes what the pages write, with decimals that follow a standard error of 0.1 t/ha. */
function Figures() {
  const format = useFormat();
  const decimals = format.decimals(0.1, 't/ha');
  return (
    <ul>
      <li>{format.gap(0.4, 't/ha', decimals)}</li>
      <li>{format.moneyPer(78, 'CAD', 'ha', { isSigned: true })}</li>
      <li>{format.moneyPer(290, 'CAD', 't')}</li>
      <li>{format.area(120)}</li>
      <li>{format.quantity(12.5, '%', { decimals: 1 })}</li>
    </ul>
  );
}

const figures = () =>
  screen.getAllByRole('listitem').map((item) => item.textContent.replaceAll('\u00a0', ' '));

describe('figures in the reader’s units', () => {
  it.each([
    ['en', 't/ha', ['+0.40 t/ha', '+$78/ha', '$290/t', '120 ha', '12.5%']],
    ['en', 'kg/ha', ['+400 kg/ha', '+$78/ha', '$290/t', '120 ha', '12.5%']],
    ['en', 'q/ha', ['+4.0 q/ha', '+$78/ha', '$290/t', '120 ha', '12.5%']],
    ['en', 'bu/ac', ['+5.9 bu/ac', '+$32/ac', '$7.89/bu', '296.5 ac', '12.5%']],
    ['fr', 'bu/ac', ['+5,9 bo/ac', '+32 $/ac', '7,89 $/bo', '296,5 ac', '12,5\u202f%']],
  ] as const)('%s, %s', async (language, yieldUnit, written) => {
    await renderClient(
      <ReaderUnitsProvider units={{ ...bushels, yieldUnit }}>
        <Figures />
      </ReaderUnitsProvider>,
      { language },
    );
    expect(figures()).toEqual(written);
  });
});

describe('the gap strip in bushels', () => {
  const strip = <GapStrip title="Gaps" rows={[row]} currentName="Brindle" unit="t/ha" decimals={1} />;

  it('has round bushels on its axis, and its marks where they were', async () => {
    await renderClient(strip);
    const place = (mark: string) => screen.getByRole('img').querySelector(`[data-mark="${mark}"]`)?.outerHTML;
    const inTonnes = [place('region'), place('break-even'), place('estimate')];
    await renderClient(<ReaderUnitsProvider units={bushels}>{strip}</ReaderUnitsProvider>);
    const [, inBushels] = screen.getAllByRole('img');
    if (!inBushels) throw new Error('no second strip');
    for (const [at, mark] of ['region', 'break-even', 'estimate'].entries()) {
      expect(inBushels.querySelector(`[data-mark="${mark}"]`)?.outerHTML).toBe(inTonnes[at]);
    }
    expect(screen.getByText('Gap to Brindle, bu/ac')).toBeTruthy();
    expect(screen.getByText('+10')).toBeTruthy();
    expect(inBushels.getAttribute('aria-label')?.replaceAll('\u00a0', ' ')).toContain(
      'between +3.0 bu/ac and +8.9 bu/ac (95% interval)',
    );
  });
});

describe('a caution in bushels', () => {
  it('says its yields in the unit of the page, both ends of a span', async () => {
    function Said() {
      const say = useCautionItems();
      return say([
        {
          code: 'usual-yield-outside-trials',
          severity: 'note',
          values: { variety: 'Ostermoor', yield: 7, from: 3, to: 6 },
        },
      ]).map(({ id, text }) => <p key={id}>{text}</p>);
    }
    await renderClient(
      <ReaderUnitsProvider units={bushels}>
        <Said />
      </ReaderUnitsProvider>,
      { namespaces: ['cautions'] },
    );
    const text = document.body.textContent.replaceAll('\u00a0', ' ');
    expect(text).toContain('usual yield of 104.1 bu/ac');
    expect(text).toContain('(44.6 to 89.2 bu/ac)');
  });
});

function Address() {
  return <output>{useLocation().search}</output>;
}

function Page() {
  const choose = useUnitChoice();
  return (
    <CropUnits bushelWeightLb={48}>
      <UnitSwitch onChoose={choose} />
      <Figures />
      <Address />
    </CropUnits>
  );
}

describe('choosing a unit', () => {
  afterEach(() => localStorage.clear());

  it('stands in the address, says the weight of the bushel and is remembered for the next page', async () => {
    const first = await renderClient(<Page />);
    expect(figures()[0]).toBe('+0.40 t/ha');
    await userEvent
      .setup()
      .selectOptions(
        screen.getByLabelText('Units'),
        screen.getByRole('option', { name: 'bu/ac (bushel of 48\u00a0lb)' }),
      );
    expect(figures()[0]).toBe('+7.4 bu/ac');
    expect(screen.getByText('?unit=bu-ac')).toBeTruthy();
    first.unmount();
    await renderClient(<Page />);
    expect(figures()[0]).toBe('+7.4 bu/ac');
  });

  it('leaves a link in the unit it was sent in, and takes no other from it', async () => {
    const first = await renderClient(<Page />, { at: '/?unit=q-ha' });
    expect(figures()[0]).toBe('+4.0 q/ha');
    first.unmount();
    await renderClient(<Page />, { at: '/?unit=furlong' });
    expect(figures()[0]).toBe('+0.40 t/ha');
    fireEvent.change(screen.getByLabelText('Units'), { target: { value: 'kg/ha' } });
    expect(figures()[0]).toBe('+400 kg/ha');
  });
});
