/**
 * Does the work, and puts things back after it however it ended. What goes wrong with putting back after an
 * error must not hide that error: it is the reason, and whoever stops the run makes the bench safe again.
 */
export async function afterwards(work: () => Promise<void>, putBack: () => Promise<void>): Promise<void> {
  try {
    await work();
  } catch (error) {
    await putBack().catch(() => undefined);
    throw error;
  }
  await putBack();
}
