declare module "csv-spectrum" {
  interface File {
    name: string;
    csv: Buffer;
    json: Buffer;
  }
  /** Reads all pairs of the package. */
  export default function spectrum(done: (error: Error | null, files: File[]) => void): void;
}
