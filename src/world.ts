/** The one door to files and other things outside. The core reads nothing else, so it runs in tests and in a browser alike. */
export interface World {
  /**
   * The text of a user's file, or why it could not be read. Paths are as the user wrote them, `/`-separated, relative to where the
   * program runs. With `within`, a folder (empty: the present one), a file that links lead out of it to is "outside".
   */
  readText(
    path: string,
    within?: string,
  ): Promise<{ text: string } | { problem: "missing" | "unreadable" | "not-text" | "folder" | "outside" }>;
  /** A file carried with the program: `symbols/…` or `templates/…`. Throws if it is missing: that is a broken installation. */
  readAsset(path: string): Uint8Array;
  /** Names of the files in a carried folder, sorted. */
  listAssets(folder: string): string[];
}
