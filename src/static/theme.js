// Sets the theme before the first paint, so that a dark room is never flashed with a white page.
(function () {
  var choice = null;
  try {
    choice = localStorage.getItem('downreach-theme');
  } catch {
    choice = null;
  }
  var isNight = choice === 'night' || (choice !== 'day' && matchMedia('(prefers-color-scheme: dark)').matches);
  document.documentElement.dataset.theme = isNight ? 'night' : 'day';
})();
