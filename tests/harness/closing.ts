/** What a test file opened and must close before its database is dropped. The last opened closes first. */

const closers: (() => Promise<unknown>)[] = [];

export function atEnd(close: () => Promise<unknown>) {
  closers.push(close);
}

export async function runClosers() {
  for (const close of closers.splice(0).reverse()) await close();
}
