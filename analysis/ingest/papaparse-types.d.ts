/** What is used of PapaParse: its own types would bring Node's into the pure layer (see tsconfig.json). */
declare const Papa: {
  parse<Row>(text: string, options: { delimiter: string }): { data: Row[] };
};
export default Papa;
