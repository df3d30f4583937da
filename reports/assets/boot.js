"use strict";
(function () {
  // Draws every [data-chart] of the page from the JSON block that it names. The page
  // is complete without this script: every chart has its numbers in a table.
  var LIGHT = {
    series: ["#0072B2", "#D55E00", "#00795A", "#B3447E", "#8A6500", "#2E8FC4", "#5E4FA2", "#555555"],
    ink: "#1c2126", soft: "#5a636c", line: "#8a939c", grid: "#e1e5e9", back: "#ffffff"
  };
  var DARK = {
    series: ["#56B4E9", "#FF9D45", "#2FC79A", "#E79BC2", "#E6C53A", "#9CC9FF", "#B3A8F0", "#BBBBBB"],
    ink: "#e8eaec", soft: "#a7b0b8", line: "#7b858e", grid: "#343b42", back: "#171b1f"
  };

  function theme(p) {
    var axis = {
      axisLine: {show: true, lineStyle: {color: p.line}}, axisTick: {show: true, lineStyle: {color: p.line}},
      axisLabel: {color: p.soft, fontSize: 12}, splitLine: {lineStyle: {color: p.grid}},
      nameTextStyle: {color: p.ink, fontSize: 12}
    };
    return {
      color: p.series, backgroundColor: "transparent",
      textStyle: {color: p.ink, fontFamily: "system-ui, sans-serif"},
      valueAxis: axis, logAxis: axis, categoryAxis: Object.assign({}, axis, {axisTick: {show: false}, splitLine: {show: false}}),
      tooltip: {backgroundColor: p.back, borderColor: p.line, borderWidth: 1, textStyle: {color: p.ink, fontSize: 12},
        axisPointer: {lineStyle: {color: p.line}, crossStyle: {color: p.line}}},
      line: {symbol: "circle", symbolSize: 5},
      bar: {label: {rich: {key: {color: p.ink, backgroundColor: p.back, padding: [2, 4], borderRadius: 3}}}},
      sankey: {label: {color: p.ink, textBorderColor: p.back, textBorderWidth: 2, fontSize: 12}, itemStyle: {borderWidth: 0}}
    };
  }

  var RAISED = {"-": "\u207b", "0": "\u2070", "1": "\u00b9", "2": "\u00b2", "3": "\u00b3", "4": "\u2074", "5": "\u2075",
    "6": "\u2076", "7": "\u2077", "8": "\u2078", "9": "\u2079"};
  function raise(n) { return String(n).replace(/./g, function (c) { return RAISED[c] || c; }); }
  function group(s) { return s.length > 3 ? group(s.slice(0, -3)) + "\u202f" + s.slice(-3) : s; }
  function num(v) {
    if (typeof v !== "number" || !isFinite(v)) { return "-"; }
    if (v === 0) { return "0"; }
    var a = Math.abs(v);
    if (a >= 1e-3 && a < 1e7) {
      return String(Number(v.toPrecision(4))).replace(/^(-?\d+)(\d{3})$/, function (s, head, tail) { return a < 1e4 ? s : group(head) + "\u202f" + tail; });
    }
    var e = Math.floor(Math.log10(a)), m = Number((v / Math.pow(10, e)).toPrecision(3));
    return (m === 1 ? "" : m + " \u00d7 ") + "10" + raise(e);
  }
  // A brace would start a text style in ECharts.
  function text(s) { return String(s).replace(/[{}|]/g, " "); }
  function first(x) { return Array.isArray(x) ? x[0] : x; }

  // Formatters by name. Each gets the option it belongs to; no code comes from data.
  var FORMATTERS = {
    num: function () { return num; },
    axis: function (option) {
      return function (params) {
        var list = Array.isArray(params) ? params : [params];
        if (!list.length) { return ""; }
        var byHeight = option.tooltip.axisPointer && option.tooltip.axisPointer.axis === "y";
        var base = byHeight ? 1 : 0, head = first(byHeight ? option.yAxis : option.xAxis).name;
        var seen = {}, lines = [text(head) + ": " + num(list[0].value[base])];
        list.forEach(function (p) {
          if (seen[p.seriesIndex]) { return; }
          seen[p.seriesIndex] = true;
          lines.push(text(p.seriesName) + ": " + num(p.value[1 - base]));
        });
        return lines.join("\n");
      };
    },
    item: function (option) {
      return function (p) {
        var marks = Array.isArray(p.value), v = marks ? p.value[0] : p.value;
        var row = marks ? first(option.yAxis).data[p.value[1]] : p.name;
        return text(p.seriesName) + "\n" + text(row) + ": " + num(v);
      };
    },
    // The letter of a segment; the legend under the chart has the same letters.
    letter: function (option) {
      var list = option.series, total = {};
      list.forEach(function (s) { s.data.forEach(function (v, i) { total[i] = (total[i] || 0) + v; }); });
      var most = Math.max.apply(null, Object.keys(total).map(function (i) { return total[i]; }));
      return function (p) { return p.value > 0.04 * most ? "{key|" + String.fromCharCode(65 + p.seriesIndex) + "}" : ""; };
    },
    letterShare: function () {
      return function (p) { return p.value >= 6 ? "{key|" + String.fromCharCode(65 + p.seriesIndex) + " " + num(Number(p.value.toPrecision(3))) + " %}" : ""; };
    },
    node: function () { return function (p) { return text(p.name) + "  " + num(p.value); }; },
    flow: function () {
      return function (p) {
        return p.dataType === "edge" ? text(p.data.source) + " \u2192 " + text(p.data.target) + ": " + num(p.value) : text(p.name) + ": " + num(p.value);
      };
    }
  };
  var FUNCTION_KEYS = {formatter: true};
  var COLOUR_KEYS = {color: true, borderColor: true};

  // Turns names of formatters and colours into functions and colours, only under the
  // keys that take them and never inside data.
  function revive(o, option, p) {
    if (Array.isArray(o)) { o.forEach(function (v) { revive(v, option, p); }); return; }
    if (!o || typeof o !== "object") { return; }
    Object.keys(o).forEach(function (k) {
      var v = o[k];
      if (k === "data" || k === "links") { return; }
      if (typeof v !== "string") { revive(v, option, p); return; }
      if (FUNCTION_KEYS[k] && v.slice(0, 4) === "@fn:") {
        if (!Object.prototype.hasOwnProperty.call(FORMATTERS, v.slice(4))) { throw new Error("unknown formatter " + v); }
        o[k] = FORMATTERS[v.slice(4)](option);
      } else if (COLOUR_KEYS[k] && v.charAt(0) === "@") {
        var i = Number(v.slice(1));
        o[k] = v === "@ink" ? p.ink : v === "@soft" ? p.soft : v === "@line" ? p.line : p.series[i % p.series.length];
      }
    });
  }

  var dark = window.matchMedia("(prefers-color-scheme: dark)");
  var printing = window.matchMedia("print");
  var boxes = Array.prototype.slice.call(document.querySelectorAll("[data-chart]"));
  var drawn = [];

  function palette(paper) { return dark.matches && !paper ? DARK : LIGHT; }

  function draw(box, p) {
    try {
      var option = JSON.parse(document.getElementById(box.getAttribute("data-chart")).textContent);
      revive(option, option, p);
      var chart = window.echarts.init(box, theme(p), {renderer: "svg"});
      chart.setOption(option);
      return chart;
    } catch (e) {
      box.setAttribute("data-error", String(e));
      box.textContent = "This chart could not be drawn. Its numbers are in the table below it.";
      return null;
    }
  }

  function drawAll(paper) {
    drawn.forEach(function (c) { if (c) { c.dispose(); } });
    drawn = boxes.map(function (box) { return draw(box, palette(paper)); });
  }

  // Bars get room by their number.
  function tall(box) { return Number(box.getAttribute("data-height")); }
  boxes.forEach(function (box) { if (tall(box)) { box.style.height = tall(box) + "px"; } });

  drawAll(false);
  dark.addEventListener("change", function () { if (!printing.matches) { drawAll(false); } });

  // The print layout does not exist yet when beforeprint fires, and a resize alone
  // would paint in a frame that never comes: set paper sizes and paint now.
  window.addEventListener("beforeprint", function () {
    if (dark.matches) { drawAll(true); }
    drawn.forEach(function (c, i) {
      if (c) {
        c.resize({width: 680, height: tall(boxes[i]) || (boxes[i].classList.contains("flow") ? 230 : 205)});
        c.getZr().flush();
      }
    });
  });
  window.addEventListener("afterprint", function () {
    if (dark.matches) { drawAll(false); return; }
    drawn.forEach(function (c) { if (c) { c.resize({width: "auto", height: "auto"}); } });
  });

  // A capture of the page shrinks the window for a moment: wait, and ignore that.
  var waiting = 0;
  var watch = new ResizeObserver(function () {
    clearTimeout(waiting);
    waiting = setTimeout(function () {
      if (printing.matches) { return; }
      drawn.forEach(function (c, i) { if (c && boxes[i].clientWidth >= 60) { c.resize({width: "auto", height: "auto"}); } });
    }, 120);
  });
  boxes.forEach(function (box) { watch.observe(box); });

  document.body.setAttribute("data-ready", "true");
})();
