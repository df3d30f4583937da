// What the report needs of Apache ECharts. A chart type or component missing here
// draws nothing and says nothing, so the browser test looks inside every chart.
import * as core from "echarts/core";
import {BarChart, BoxplotChart, CustomChart, HeatmapChart, LineChart, SankeyChart, ScatterChart} from "echarts/charts";
import {
  AriaComponent, AxisPointerComponent, GridComponent, LegendComponent, MarkAreaComponent, MarkLineComponent,
  MarkPointComponent, TitleComponent, TooltipComponent, VisualMapComponent
} from "echarts/components";
import {LabelLayout} from "echarts/features";
import {SVGRenderer} from "echarts/renderers";

core.use([
  BarChart, BoxplotChart, CustomChart, HeatmapChart, LineChart, SankeyChart, ScatterChart,
  AriaComponent, AxisPointerComponent, GridComponent, LegendComponent, MarkAreaComponent, MarkLineComponent,
  MarkPointComponent, TitleComponent, TooltipComponent, VisualMapComponent,
  LabelLayout, SVGRenderer
]);
globalThis.echarts = {init: core.init, version: core.version};
