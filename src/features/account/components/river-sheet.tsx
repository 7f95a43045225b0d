/**
 * A sheet of a river map, drawn for the pages before sign-in: a bend, its depth lines, a staff in the margin and a cloud
 * that follows the stream. A drawing, not a place and not a forecast.
 */
export function RiverSheet() {
  return (
    <svg viewBox="0 0 720 900" preserveAspectRatio="xMaxYMid slice" className="size-full" aria-hidden="true">
      <g className="fill-none stroke-rule" strokeWidth="1">
        {reliefs.map((d) => (
          <path key={d} d={d} />
        ))}
      </g>
      <g fill="none" strokeLinecap="round" className="stroke-kingfisher">
        <path d={tributary} strokeWidth="26" opacity="0.14" />
        <path d={course} strokeWidth="92" opacity="0.14" />
        <path d={course} strokeWidth="56" opacity="0.1" />
        <path d={course} strokeWidth="92" className="stroke-paper" strokeDasharray="1 15" opacity="0.35" />
      </g>
      <g fill="none" strokeLinecap="round">
        {cloud.map(([from, to, width, colour]) => (
          <path key={from} d={course} pathLength={100} strokeDasharray={`${to - from} 200`} strokeDashoffset={-from} strokeWidth={width} className={colour} opacity="0.75" />
        ))}
      </g>
      <g className="fill-none stroke-ink" strokeWidth="1.5">
        <circle cx="548" cy="118" r="9" className="fill-paper" />
        <path d="M548 109v-6M548 133v-6M533 118h6M557 118h6" />
        <rect x="222" y="560" width="26" height="20" className="fill-paper" />
        <rect x="330" y="722" width="26" height="20" className="fill-paper" />
      </g>
      <g className="fill-none stroke-ink2" strokeWidth="1">
        {ticks.map((y, i) => (
          <path key={y} d={`M664 ${y}h${i % 5 === 0 ? 30 : 14}`} />
        ))}
        <path d={`M664 ${ticks[0]}V${ticks.at(-1)}`} />
      </g>
    </svg>
  );
}

const course = 'M640 -40C600 60 560 80 540 140C510 240 620 300 560 390C500 470 330 420 270 520C220 610 330 660 330 740C330 810 250 850 180 940';
const tributary = 'M-40 300C80 320 110 420 190 440C230 450 250 480 268 516';
const reliefs = [
  'M-20 60C120 20 260 90 330 60S470 -10 520 -40',
  'M-20 120C120 80 270 160 360 130S480 60 500 20',
  'M-20 190C110 150 250 230 370 210S470 160 490 120',
  'M-20 640C60 600 130 640 170 700S150 820 90 940',
  'M-20 720C40 690 90 720 110 770S90 860 40 940',
  'M740 440C660 470 610 520 540 540S430 560 420 640S470 780 410 940',
  'M740 520C670 540 630 580 570 600S500 650 510 720S540 830 500 940',
  'M740 610C690 630 640 660 610 690S590 770 600 940',
];
/** From and to as hundredths of the course, width, colour: the cloud narrows towards its core. */
const cloud: readonly (readonly [number, number, number, string])[] = [
  [14, 62, 62, 'stroke-madder-1'],
  [19, 55, 48, 'stroke-madder-2'],
  [26, 49, 35, 'stroke-madder-3'],
  [32, 44, 22, 'stroke-madder-4'],
  [36, 41, 10, 'stroke-madder-5'],
];
const ticks = Array.from({ length: 36 }, (_, i) => 40 + i * 24);
