export const say = (text: string) => process.stdout.write(`weighhouse: ${text}\n`);
