/** What stopped a clip on its way out of this device, and that nothing chosen is lost. */
export const NOT_LOADED = 'What reads film could not be loaded, so nothing was sent. Check your connection and choose the clip again.'
export const NOT_MADE = 'The clip could not be made ready on this device. Your swings are kept; try again, or choose another clip.'
export const NOT_DELIVERED = 'The studio could not be reached, so nothing was sent yet. Your swings are kept; try again in a moment.'
export const NOT_KEPT = 'This browser does not keep the clip until you have an account: a private window, or too little room. Open your account first; your question is kept, and the clip can be chosen then.'
