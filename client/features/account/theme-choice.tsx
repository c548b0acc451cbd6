import { RadioGroup } from '@client/ui/radio-group'
import { type ThemeChoice as Theme, useTheme } from '@client/ui/theme'

export function ThemeChoice() {
  const [theme, setTheme] = useTheme()
  return (
    <RadioGroup<Theme>
      legend="Light or dark"
      value={theme}
      onChange={setTheme}
      inline
      choices={[
        { value: 'system', label: 'as the system' },
        { value: 'light', label: 'daylight' },
        { value: 'dark', label: 'late set' }
      ]}
    />
  )
}
