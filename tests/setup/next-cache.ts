/** Stands in for next/cache outside a request: there is no page to refresh. */
export function revalidatePath(): void {}
