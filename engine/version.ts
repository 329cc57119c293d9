/** Version of the calculation. Any change that can move a result raises it; stored results keep the one they were made with. */
export const ENGINE_VERSION = '0.2.0'
