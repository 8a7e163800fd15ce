// Runs before the first paint, from a file of its own because the policy allows no inline script.
(function () {
  var dark = window.matchMedia('(prefers-color-scheme: dark)');
  function apply() {
    var choice = null;
    try { choice = window.localStorage.getItem('crosstie.theme'); } catch { choice = null; }
    var theme = choice === 'light' || choice === 'dark' ? choice : dark.matches ? 'dark' : 'light';
    document.documentElement.dataset.theme = theme;
  }
  apply();
  dark.addEventListener('change', apply);
  window.addEventListener('crosstie:theme', apply);
})();
