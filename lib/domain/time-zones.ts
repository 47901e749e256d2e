// The runtime lists some places under names that fell out of use; people look for today's.
const todaysNames: Readonly<Record<string, string>> = {
  'Africa/Asmera': 'Africa/Asmara',
  'America/Buenos_Aires': 'America/Argentina/Buenos_Aires',
  'America/Catamarca': 'America/Argentina/Catamarca',
  'America/Coral_Harbour': 'America/Atikokan',
  'America/Cordoba': 'America/Argentina/Cordoba',
  'America/Godthab': 'America/Nuuk',
  'America/Indianapolis': 'America/Indiana/Indianapolis',
  'America/Jujuy': 'America/Argentina/Jujuy',
  'America/Louisville': 'America/Kentucky/Louisville',
  'America/Mendoza': 'America/Argentina/Mendoza',
  'Asia/Calcutta': 'Asia/Kolkata',
  'Asia/Katmandu': 'Asia/Kathmandu',
  'Asia/Rangoon': 'Asia/Yangon',
  'Asia/Saigon': 'Asia/Ho_Chi_Minh',
  'Atlantic/Faeroe': 'Atlantic/Faroe',
  'Europe/Kiev': 'Europe/Kyiv',
  'Pacific/Ponape': 'Pacific/Pohnpei',
  'Pacific/Truk': 'Pacific/Chuuk',
}

/** Every time zone that can be chosen, by its name of today. */
export const timeZones: readonly string[] = [
  ...new Set([...Intl.supportedValuesOf('timeZone').map((zone) => todaysNames[zone] ?? zone), 'UTC']),
].sort()

const known = new Set([...timeZones, ...Intl.supportedValuesOf('timeZone')])

/** Whether a text is the name of a zone, today's or the one the runtime lists; offsets such as "+01:00" are none. */
export function isTimeZone(text: string): boolean {
  return known.has(text)
}
