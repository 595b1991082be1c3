/** What a browser has and jsdom has not, in its quietest form: no media query matches, nothing ever changes its size. */
import { cleanup } from "@testing-library/react";
import { afterEach } from "vitest";

afterEach(cleanup);

window.matchMedia = (media) =>
  Object.assign(new EventTarget(), { media, matches: false, onchange: null, addListener: () => {}, removeListener: () => {} });

window.ResizeObserver = class {
  observe() {}
  unobserve() {}
  disconnect() {}
};

window.HTMLElement.prototype.scrollIntoView = () => {};
