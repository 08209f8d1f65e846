declare module "jstat" {
  interface Distribution {
    inv(p: number, ...parameters: number[]): number;
    cdf(x: number, ...parameters: number[]): number;
  }
  const jstat: { beta: Distribution; normal: Distribution; gammaln(x: number): number };
  export default jstat;
}
