/**
 * Why a name in an archive is refused, or null. Names are plain relative paths: what any system
 * writes inside the folder that it unpacks into, under that very name.
 */
export function nameFault(name: string): string | null {
  if (name.length === 0 || name.length > 200) return "a name of 1 to 200 characters is allowed";
  if (/^[/\\]|^[A-Za-z]:/.test(name)) return "the path leaves the folder";
  const steps = name.split("/");
  if (steps.some((step) => step === ".." || step === ".")) return "the path leaves the folder";
  if (steps.some((step) => !/^[A-Za-z0-9_-][A-Za-z0-9._-]*$/.test(step))) {
    return "names are made of A-Z a-z 0-9 . _ - with / between";
  }
  return null;
}
