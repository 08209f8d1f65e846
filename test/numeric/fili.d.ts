/** What is used of fili, which comes without types. */
declare module "fili" {
  class Fft {
    /** @param length a power of two; any other yields an object without methods */
    constructor(length: number);
    /** The arrays belong to the transform and hold until its next call. */
    forward(values: ArrayLike<number>, window: "none"): { re: Float64Array; im: Float64Array };
  }
  const fili: { Fft: typeof Fft };
  export default fili;
}
