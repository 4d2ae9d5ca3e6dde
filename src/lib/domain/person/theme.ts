/** How a device may choose its colours; `device` follows its own setting. */
export const THEMES = [
	{ id: 'device', label: 'as this device' },
	{ id: 'day', label: 'day' },
	{ id: 'night', label: 'night' }
] as const;
export type Theme = (typeof THEMES)[number]['id'];

/** The cookie that keeps the choice. */
export const THEME_COOKIE = 'catchwater_theme';

/** A cookie's or a form's word as a theme; anything unknown follows the device. */
export function toTheme(word: string | null | undefined): Theme {
	return THEMES.find((theme) => theme.id === word)?.id ?? 'device';
}
