/** Name and version that the agent tells of itself, at most 40 characters. */
export const SOFTWARE = 'ellwand-agent 0.2.0';
