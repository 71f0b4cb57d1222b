module.exports = function (api) {
  api.cache(true);
  // No worklet runs on the web: leave the functions as they are.
  return { presets: [['babel-preset-expo', { worklets: false, reanimated: false }]] };
};
