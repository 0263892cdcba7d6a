export function chromium(): Promise<string>
