export function python(): Promise<string>
