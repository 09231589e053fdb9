/** The chart library ships no types; only the component factory reads it. */
declare module 'plotly.js' {
  const plotly: object;
  export default plotly;
}
