import { Failure } from '../services/failure'

/** What is no route of the API, or not by that method, is answered in the API's own words: no page is rendered for it, and nobody is led to a sign-in. */
export default defineNitroPlugin((nitro) => {
  nitro.hooks.hook('render:before', ({ event }) => {
    if (/^\/(api|health)\//.test(event.path)) throw new Failure('notFound', 'There is nothing at this address, or not by this method.')
  })
})
