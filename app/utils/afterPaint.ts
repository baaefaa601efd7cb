/** Settles when what the page now holds is on screen; where frames stand still, as behind another window, after a second. */
export function afterPaint(): Promise<void> {
  return new Promise((done) => {
    requestAnimationFrame(() => requestAnimationFrame(() => done()))
    setTimeout(done, 1000)
  })
}
