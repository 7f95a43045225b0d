import { act, cleanup, fireEvent, render, screen, waitFor } from '@testing-library/react';
import { afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import type { LonLat } from '../../shared/schemas/basics';
import { ConcentrationGauge } from './concentration-gauge';
import { DistrictMap } from './district-map';
import { ReceptorLayer } from './receptor-layer';
import { ReceptorPlate } from './receptor-plate';
import { ReleaseLayer } from './release-layer';

beforeAll(() => {
  // jsdom lays nothing out: give the map a size and nothing to observe.
  vi.stubGlobal('ResizeObserver', class { observe() {} unobserve() {} disconnect() {} });
  Object.defineProperty(HTMLElement.prototype, 'clientWidth', { configurable: true, get: () => 800 });
  Object.defineProperty(HTMLElement.prototype, 'clientHeight', { configurable: true, get: () => 600 });
});
afterEach(cleanup);

const centre: LonLat = [-116.8, -44.45];
const show = (props: Partial<Parameters<typeof DistrictMap>[0]> = {}) => {
  render(<DistrictMap theme="day" label="Map of the district" initialView={{ centre, zoom: 12 }} {...props} />);
  return screen.getByRole('application', { name: 'Map of the district' });
};
/** To within 0.0005 degrees: the map stands on whole pixels, and one is 0.00034 degrees at zoom 12. */
const close = (position: LonLat) => [expect.closeTo(position[0], 3), expect.closeTo(position[1], 3)];

describe('the map by keyboard', () => {
  it('shows a cross-hair once a key moves it, says where it stands, and places there with Enter', () => {
    const onClick = vi.fn();
    const map = show({ onClick });
    expect(document.querySelector('.map-cross-hair')).toBeNull();
    fireEvent.keyDown(map, { key: 'Enter' });
    expect(onClick).toHaveBeenLastCalledWith(close(centre));
    fireEvent.keyDown(map, { key: 'ArrowRight' });
    expect(document.querySelector('.map-cross-hair')).not.toBeNull();
    fireEvent.keyDown(map, { key: 'Enter' });
    // 80 px at zoom 12, where the world is 256 * 4096 px wide.
    const east = centre[0] + (80 * 360) / (256 * 4_096);
    expect(onClick).toHaveBeenLastCalledWith(close([east, centre[1]]));
    expect(screen.getByText(/^Cross-hair at/).textContent).toContain('116.77');
  });

  it('goes back to the pointer when the pointer is used', () => {
    const map = show();
    fireEvent.keyDown(map, { key: 'ArrowUp' });
    fireEvent.pointerDown(map);
    expect(document.querySelector('.map-cross-hair')).toBeNull();
  });
});

describe('the tools of the map', () => {
  it('measure along typed positions and end with Escape', async () => {
    const onClick = vi.fn();
    show({ onClick });
    fireEvent.click(screen.getByRole('button', { name: 'Measure a distance' }));
    const input = screen.getByRole('textbox', { name: 'Next position of the tape' });
    for (const text of ['0, 10', '0, 11']) {
      fireEvent.change(input, { target: { value: text } });
      fireEvent.click(screen.getByRole('button', { name: 'Add' }));
    }
    // One degree of the equator on the mean sphere: 2 pi 6371.0088 / 360 = 111.2 km.
    expect(await screen.findByText('111.2 km')).toBeTruthy();
    fireEvent.change(input, { target: { value: 'nowhere' } });
    fireEvent.click(screen.getByRole('button', { name: 'Add' }));
    expect(screen.getByRole('alert').textContent).toMatch(/latitude then longitude/);
    fireEvent.keyDown(document, { key: 'Escape' });
    await waitFor(() => expect(screen.queryByRole('textbox', { name: 'Next position of the tape' })).toBeNull());
    expect(onClick).not.toHaveBeenCalled();
  });

  it('go to typed coordinates and say how they were read', () => {
    const onClick = vi.fn();
    const map = show({ onClick });
    fireEvent.click(screen.getByRole('button', { name: 'Go to coordinates' }));
    const input = screen.getByRole('textbox', { name: 'Coordinates' });
    fireEvent.change(input, { target: { value: '44 30 S 117 15 W' } });
    expect(screen.getByText(/44\.50000° S, 117\.25000° W · 11 S/)).toBeTruthy();
    fireEvent.click(screen.getByRole('button', { name: 'Go' }));
    fireEvent.keyDown(map, { key: 'Enter' });
    expect(onClick).toHaveBeenLastCalledWith(close([-117.25, -44.5]));
  });

  it('cycle the coordinates through three ways of writing and keep the choice', () => {
    show();
    const button = screen.getByTitle(/^Coordinates in/);
    expect(button.textContent).toContain('44.45000° S');
    fireEvent.click(button);
    expect(button.textContent).toContain('44° 27.000′ S');
    fireEvent.click(button);
    expect(button.textContent).toMatch(/11 S \d{6} \d{7}/);
    cleanup();
    show();
    expect(screen.getByTitle(/^Coordinates in/).textContent).toMatch(/11 S/);
    localStorage.clear();
  });
});

const receptor = { id: 'a', registerId: null, code: 'INT-1', name: 'Dunnaveth <intake>', kind: 'intake' as const, position: centre, channel: null, depthM: null, closingS: null, storageS: null, actionValues: [] };

describe('marks on the map', () => {
  it('are buttons that say what they are, by pointer and by keyboard', () => {
    const onSelect = vi.fn();
    show({ children: <ReceptorLayer receptors={[receptor]} selectedId={null} onSelect={onSelect} numbers={new Map([['a', 7]])} /> });
    const mark = screen.getByRole('button', { name: '7: INT-1 Dunnaveth <intake>, drinking-water intake' });
    fireEvent.click(mark);
    fireEvent.keyDown(mark, { key: 'Enter' });
    expect(onSelect.mock.calls).toEqual([['a'], ['a']]);
  });

  it('move a release by arrow keys as far as the caller lets it', () => {
    const onMove = vi.fn((_id: string, position: LonLat) => position);
    show({ children: <ReleaseLayer releases={[{ id: 'r', name: 'first', position: centre, timeLabel: '06:40' }]} onMove={onMove} /> });
    fireEvent.keyDown(screen.getByRole('button', { name: /^Release first, 06:40/ }), { key: 'ArrowRight' });
    const [id, position, ended] = onMove.mock.calls[0] as unknown as [string, LonLat, boolean];
    expect([id, ended]).toEqual(['r', true]);
    expect(position).toEqual(close([centre[0] + (8 * 360) / (256 * 4_096), centre[1]]));
  });

  it('leave no mark behind when they go', () => {
    const { rerender, unmount } = render(<DistrictMap theme="day" label="Map" initialView={{ centre, zoom: 12 }}><ReceptorLayer receptors={[receptor]} onSelect={() => undefined} /></DistrictMap>);
    expect(document.querySelectorAll('.receptor-mark')).toHaveLength(1);
    act(() => rerender(<DistrictMap theme="day" label="Map" initialView={{ centre, zoom: 12 }}><ReceptorLayer receptors={[]} onSelect={() => undefined} /></DistrictMap>));
    expect(document.querySelectorAll('.receptor-mark')).toHaveLength(0);
    unmount();
  });
});

describe('the legend', () => {
  it('prints the value at each edge of a band and marks action values', () => {
    render(<ConcentrationGauge theme="day" measure="mass" levels={[{ value: 3.9e-4, isActionValue: true, label: '' }, { value: 1e-3, isActionValue: false, label: '' }]} />);
    const gauge = screen.getByRole('img');
    expect(gauge.getAttribute('aria-label')).toContain('390 µg/l (action value), 1.0 mg/l');
    expect(gauge.textContent).toBe('390 µg/l1.0 mg/laction value');
    expect(gauge.querySelectorAll('rect[fill]')).toHaveLength(2);
  });

  it('tells a plate by words as well as by shape and fill', () => {
    render(<ReceptorPlate kind="shellfish" number={3} state="hatched" />);
    expect(screen.getByRole('img', { name: 'shellfish water, cannot be estimated' })).toBeTruthy();
  });
});
