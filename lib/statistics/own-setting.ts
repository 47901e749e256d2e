/**
 * What a setting says of one material, `null` where it says nothing.
 *
 * A material may bear a name that every object answers to, such as constructor, and must not be taken for set by it.
 */
export function ownSetting<Value>(
  setting: Readonly<Record<string, Value>> | undefined,
  material: string,
): Value | null {
  return setting !== undefined && Object.hasOwn(setting, material) ? setting[material]! : null
}
