import fc from "fast-check";
import { parseHTML } from "linkedom";
import { describe, expect, test } from "vitest";
import { cleanHtml } from "../../lib/report/clean_html.ts";

const clean = (html: string) => cleanHtml(html, undefined, "p-");

describe("what can be read stays", () => {
  test.each([
    ["after a tag that closes too much", "</div></section><p>kept</p>"],
    [
      "in a document of its own",
      "<html><head><title>t</title></head><body><p>kept</p></body></html>",
    ],
    ["in a form", "<form action='x'><p>kept</p></form>"],
    ["without a closing tag", "<div><p>kept"],
  ])("%s", (_, html) => {
    expect(clean(html)).toContain("<p>kept</p>");
  });

  test("text, whatever it is", () => {
    const escaped = (text: string) =>
      text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;");
    fc.assert(fc.property(fc.string(), (text) => {
      expect(clean(`<p>${escaped(text)}</p>`)).toBe(
        `<p>${escaped(text)}</p>`.replaceAll("\u00a0", "&nbsp;"),
      );
    }));
  });

  test.each([
    `<a href="https://example.org">x</a>`,
    `<a href="mailto:a@example.org">x</a>`,
    `<img alt="x" src="data:image/png;base64,AA==">`,
    `<td style="color:red">x</td>`,
    `<p title="see url(x)">x</p>`,
    `<svg><title>x</title></svg>`,
    `<svg><style>:where(.plot) { fill: red }</style></svg>`,
    `<svg><image href="data:image/png;base64,AA==" /></svg>`,
  ])("%s", (html) => {
    expect(clean(html)).toBe(html);
  });
});

describe("what runs or loads goes", () => {
  test.each([
    `<template><img src=x onerror=y></template>`,
    `<!--><img src=x onerror=y>-->`,
    `<noscript><p title="</noscript><img src=x onerror=y>"></noscript>`,
    `<xmp><img src=x onerror=y></xmp>`,
    `<meta http-equiv="refresh" content="0;url=http://example.org">`,
    `<object data="data:text/html,<p onerror=y>"></object>`,
    `<a href="&#1;javascript:y">x</a>`,
    `<svg><a xlink:href="javascript:y"><set attributeName="href" to="javascript:y"/></a></svg>`,
    `<svg><animateTransform attributeName="href" to="javascript:y"/></svg>`,
    `<svg><use href="http://example.org#a"/><path fill="url('http://example.org#a')"/></svg>`,
    `<p style="background:image-set('http://example.org' 1x)">x</p>`,
    `<p style="background:u\\72l(http://example.org)">x</p>`,
    `<svg><style>@import "http://example.org"</style></svg>`,
    `<form action="http://example.org"><button formaction="http://example.org">x</button></form>`,
    `<video poster="http://example.org"><source src="http://example.org"></video>`,
  ])("%s", (html) => {
    expect(clean(html)).not.toMatch(
      /javascript:|onerror|http:|<(template|set|animate|xmp|video|style|form)/i,
    );
  });

  test("style sheets that could hide the rest of the page too", () => {
    expect(clean("<style>.caution { display: none }</style>x")).toBe("x");
  });

  test.each([
    [`<img src="https://example.org/x.png" alt="the set-up">`, "left out: picture the set-up;"],
    [`<iframe src="x"></iframe>`, "left out: iframe;"],
    [`<div id="chart"></div><script>draw()</script>`, "left out: script;"],
  ])("but not without a word where something could be seen: %s", (html, words) => {
    expect(clean(html)).toContain(words);
  });
});

test("ids and all that points to them get the prefix", () => {
  const html = clean(
    `<p id="a" aria-labelledby="b c" aria-describedby="d">x</p><a href="#a">y</a>` +
      `<svg><use href="#a"/><path fill="url(#a)" filter="url('#a')" style="mask:url(#a)"/></svg>`,
  );
  const { document } = parseHTML(`<html><body>${html}</body></html>`);
  const values = [...document.querySelectorAll("*")].flatMap((e) =>
    [...e.attributes].map((a) => a.value)
  );
  expect(values.toSorted()).toEqual([
    ...["#p-a", "#p-a", "p-a", "p-b p-c", "p-d"],
    ...["mask:url(#p-a)", "url('#p-a')", "url(#p-a)"],
  ].toSorted());
});
