/** Element of a page that holds what the server answered before it was asked. */
export const firstAnswersId = 'first-answers';

/** The API's replies that a page asks for at once, by their addresses: `{ "/api/me": { "me": … } }`. */
export type FirstAnswers = Readonly<Record<string, unknown>>;

/** Cookie in which the client tells what language it starts in, so that the server can name that language's sentences. */
export const languageCookieName = 'gavelrow.language';

/** Cookie in which the client tells the unit that yields are read in, as the address writes it. */
export const unitCookieName = 'gavelrow.yield-unit';

/** Of the answer in a page that the server has rendered: until it is there the browser paints nothing. */
export const verdictId = 'verdict';

/** Of the part of a grower copy that its script takes over: the answer, and the prices that one may try. */
export const answerId = 'answer';
