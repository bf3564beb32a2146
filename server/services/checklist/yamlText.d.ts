/** A YAML file as its text; Vite knows `?raw`, Nitro through the plugin in nuxt.config.ts. */
declare module '*.yaml?raw' {
  const text: string
  export default text
}
