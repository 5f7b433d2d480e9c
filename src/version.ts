/** Version of this library, as its files state it; a test compares it with the package. */
export const libraryVersion: string = "0.1.0";
