// The part of Apache ECharts that the reports draw with.
export * from 'echarts/core';
import { use } from 'echarts/core';
import { CustomChart, BarChart, LineChart, ScatterChart } from 'echarts/charts';
import {
  AriaComponent, AxisPointerComponent, GridComponent, LegendComponent, MarkAreaComponent,
  MarkLineComponent, MarkPointComponent, PolarComponent, TitleComponent, TooltipComponent,
} from 'echarts/components';
import { CanvasRenderer, SVGRenderer } from 'echarts/renderers';

use([
  CustomChart, BarChart, LineChart, ScatterChart,
  AriaComponent, AxisPointerComponent, GridComponent, LegendComponent, MarkAreaComponent,
  MarkLineComponent, MarkPointComponent, PolarComponent, TitleComponent, TooltipComponent,
  CanvasRenderer, SVGRenderer,
]);
