declare module 'eslint-plugin-jsx-a11y';
