import type { ECharts } from 'echarts/core';
import type { ChartModel } from './model';
import { chartsPicture } from '../../words/charts';

const SCALE = 2;
const HEAD = 44;

/** The chart as a PNG (data URL) with its title, time and zone above, so that it says by itself what it shows. */
export async function picture(chart: ECharts, model: ChartModel, host: HTMLElement | null): Promise<string> {
  const style = getComputedStyle(host ?? document.body);
  const image = new Image();
  image.src = chart.getDataURL({
    type: 'png',
    pixelRatio: SCALE,
    backgroundColor: style.backgroundColor,
    excludeComponents: ['dataZoom'],
  });
  await image.decode();
  const canvas = document.createElement('canvas');
  canvas.width = image.width;
  canvas.height = image.height + HEAD * SCALE;
  const pen = canvas.getContext('2d');
  if (!pen) return image.src;
  pen.fillStyle = style.backgroundColor;
  pen.fillRect(0, 0, canvas.width, canvas.height);
  pen.drawImage(image, 0, HEAD * SCALE);
  pen.fillStyle = style.color;
  pen.font = `600 ${15 * SCALE}px ${style.fontFamily}`;
  pen.fillText(model.title, 16 * SCALE, 24 * SCALE);
  pen.font = `${12 * SCALE}px ${style.fontFamily}`;
  const time = chartsPicture.fromToTimeZone(model.from, model.timeZone, model.to);
  pen.fillText(time, 16 * SCALE, 42 * SCALE);
  return canvas.toDataURL('image/png');
}
