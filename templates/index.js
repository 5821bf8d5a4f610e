'use strict';
// Loads the page again while a run is live, and lets a reader stop that. Without script the page does it by itself.
(() => {
  const count = document.querySelector('.count[data-refresh]');
  if (!count) return;
  const seconds = Number(count.dataset.refresh);
  const button = document.createElement('button');
  button.type = 'button';
  let timer;
  const show = () => {
    const isPaused = location.hash === '#paused';
    button.textContent = isPaused ? 'Look again by itself' : 'Stop looking again';
    clearTimeout(timer);
    if (!isPaused) timer = setTimeout(() => location.reload(), 1000 * seconds);
  };
  button.addEventListener('click', () => {
    history.replaceState(null, '', location.hash === '#paused' ? location.pathname : '#paused');
    show();
  });
  count.append(' ', button);
  show();
})();
