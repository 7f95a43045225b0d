import { Menu } from '../components/menu';
import { useTheme, type ThemeChoice } from '../lib/theme';

const choices: { choice: ThemeChoice; label: string }[] = [
  { choice: 'day', label: 'Day' },
  { choice: 'night', label: 'Night' },
  { choice: 'system', label: 'As this device' },
];

export function ThemeSwitch() {
  const { theme, choice, setChoice } = useTheme();
  return (
    <Menu
      label=""
      ariaLabel={`Theme: ${theme}. Change it`}
      icon={theme}
      kind="quiet"
      hasArrow={false}
      anchor="bottom end"
      buttonClassName="min-w-10 pointer-coarse:min-w-11 max-sm:min-w-11 text-ink2!"
      entries={choices.map((item) => ({ label: item.label, isChosen: item.choice === choice, onSelect: () => setChoice(item.choice) }))}
    />
  );
}
