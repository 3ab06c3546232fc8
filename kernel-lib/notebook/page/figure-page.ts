/** What the figures of a page need of Plotly. */
interface PlotlyApi {
  newPlot(target: HTMLElement, data: unknown[], layout: object, config: object): Promise<unknown>;
  relayout(target: HTMLElement, change: object): Promise<unknown>;
  purge(target: HTMLElement): void;
  Plots: { resize(target: HTMLElement): Promise<unknown> };
}

/** The drawing service of a page. */
export interface FigurePage {
  /** Draws every figure of that name that is not drawn yet. */
  draw(id: string): void;
}

/**
 * Runs in a page: draws figures in place of their still pictures, in the page's own text colour, as wide as their place. Sent to the
 * page as its own text, so it uses nothing but its argument and the page.
 *
 * A browser keeps about 16 WebGL contexts and a figure of many points takes three; so at most four such figures are live,
 * and those out of sight give way, showing their still pictures.
 */
export function figurePage(plotlyModule: unknown): FigurePage {
  const plotly = plotlyModule as PlotlyApi;
  const liveLimit = 4;
  const live: HTMLElement[] = [];
  const away = new WeakSet<Element>();
  const waiting = new WeakSet<Element>();
  const places = new WeakMap<HTMLElement, HTMLElement>();
  // For figures that leave it open: greys that read on white and on black.
  const plainAxis = { gridcolor: 'rgba(128,128,128,0.25)', zerolinecolor: 'rgba(128,128,128,0.5)' };

  const style = document.createElement('style');
  // On paper the still picture is right: its inks read on white whatever the theme of the page.
  style.textContent =
    '[data-fig]>img{display:block}[data-drawn]>img{display:none}@media print{[data-drawn]>img{display:block}[data-drawn]>div{display:none!important}}';
  document.head.append(style);

  const hasWebGl = (() => {
    try {
      const gl = document.createElement('canvas').getContext('webgl');
      gl?.getExtension('WEBGL_lose_context')?.loseContext();
      return gl !== null;
    } catch {
      return false;
    }
  })();

  const inkOf = (figure: Element) => getComputedStyle(figure).color;

  const adaptTheme = (figure: HTMLElement) => {
    const place = places.get(figure);
    if (!place || !figure.isConnected) return;
    const ink = inkOf(figure);
    if (ink === '' || figure.dataset.drawn === ink) return;
    figure.dataset.drawn = ink;
    void plotly.relayout(place, { 'font.color': ink, 'modebar.color': ink, 'modebar.activecolor': ink });
  };

  const sizes = new ResizeObserver((entries) => {
    // Out of the observer's turn, as drawing changes sizes again.
    requestAnimationFrame(() => {
      for (const { target } of entries) {
        const figure = target as HTMLElement;
        const place = places.get(figure);
        if (!place || figure.clientWidth === 0) continue;
        adaptTheme(figure);
        if (place.dataset.width === String(figure.clientWidth)) continue;
        place.dataset.width = String(figure.clientWidth);
        void plotly.Plots.resize(place);
      }
    });
  });

  const release = (figure: HTMLElement) => {
    live.splice(live.indexOf(figure), 1);
    const place = places.get(figure);
    if (!place) return;
    const contexts = Array.from(place.querySelectorAll('canvas'), (c) => c.getContext('webgl'));
    plotly.purge(place);
    for (const gl of contexts) gl?.getExtension('WEBGL_lose_context')?.loseContext();
    place.remove();
    places.delete(figure);
    delete figure.dataset.drawn;
    waiting.add(figure);
  };

  const drawOne = (figure: HTMLElement) => {
    const source = figure.querySelector('script[type="application/json"]');
    if (!source || figure.dataset.drawn !== undefined) return;
    const { data, layout } = JSON.parse(source.textContent ?? '') as {
      data: { type?: string }[];
      layout: { font?: object };
    };
    if (!hasWebGl) for (const trace of data) if (trace.type === 'scattergl') trace.type = 'scatter';
    if (data.some((trace) => trace.type?.endsWith('gl'))) {
      if (live.length >= liveLimit) {
        const victim = live.find((other) => !other.isConnected) ?? live.find((other) => away.has(other));
        if (!victim) {
          waiting.add(figure);
          sights.observe(figure);
          return;
        }
        release(victim);
      }
      live.push(figure);
      sights.observe(figure);
    }
    waiting.delete(figure);
    const ink = inkOf(figure);
    const place = document.createElement('div');
    place.style.width = '100%';
    place.setAttribute('role', 'img');
    place.setAttribute('aria-label', figure.querySelector('img')?.alt ?? '');
    figure.dataset.drawn = ink;
    figure.append(place);
    places.set(figure, place);
    place.dataset.width = String(figure.clientWidth);
    const themed = {
      paper_bgcolor: 'rgba(0,0,0,0)',
      plot_bgcolor: 'rgba(0,0,0,0)',
      template: { layout: { xaxis: plainAxis, yaxis: plainAxis } },
      ...layout,
      font: { ...layout.font, color: ink },
      modebar: { bgcolor: 'rgba(0,0,0,0)', color: ink, activecolor: ink },
    };
    const config = { displaylogo: false, toImageButtonOptions: { format: 'svg' } };
    Promise.resolve()
      .then(() => plotly.newPlot(place, data, themed, config))
      .then(
        () => sizes.observe(figure),
        (error) => {
          console.error('coeval: a figure could not be drawn; its still picture stays.', error);
          place.remove();
          places.delete(figure);
          delete figure.dataset.drawn;
        },
      );
  };

  const sights = new IntersectionObserver(
    (entries) => {
      for (const { target, isIntersecting } of entries) {
        if (isIntersecting) away.delete(target);
        else away.add(target);
      }
      for (const { target, isIntersecting } of entries) {
        if (isIntersecting && waiting.has(target)) drawOne(target as HTMLElement);
      }
    },
    { rootMargin: '200px' },
  );

  const adaptAll = () => {
    for (const figure of document.querySelectorAll('[data-fig][data-drawn]')) adaptTheme(figure as HTMLElement);
  };
  // A front end may set the mark of a theme a little before its style sheet holds.
  const themeChanged = () => {
    for (const delay of [0, 100, 500]) setTimeout(adaptAll, delay);
  };
  new MutationObserver(themeChanged).observe(document.body, {
    attributes: true,
    attributeFilter: ['data-jp-theme-light', 'data-jp-theme-name', 'data-vscode-theme-kind', 'class'],
  });
  matchMedia('(prefers-color-scheme: dark)').addEventListener('change', themeChanged);

  return {
    draw(id) {
      for (const figure of document.querySelectorAll(`[data-fig="${id}"]:not([data-drawn])`)) {
        drawOne(figure as HTMLElement);
      }
    },
  };
}
