/** Version of the equations; a change of any computed number moves it. */
export const MODEL_VERSION = '1'
