import { latitudeText, longitudeText } from './coordinate-grid.js';
import { type Drawing, drawLine, drawText, type Rect, styledWidth } from './drawing.js';
import { isSupposed, type TableRow } from './figures-table.js';
import type { RegionPicture } from './region-picture.js';
import { BODY_PRIOR, RULE_INK, SMALL_PRIOR, SMALL_QUIET, SUBTITLE, TITLE } from './style.js';
import { oneLine, shortenMiddle, wrapText } from './text-fit.js';

const SUPPOSED_NOTE =
  '~ and slanted violet: rests on a prior or an assumption, not on a measurement of this region.';

/** File name and region as title; time, place and size of the patch below. */
export function drawTitle(drawing: Drawing, box: Rect, picture: RegionPicture): void {
  const region = shortenMiddle(picture.region.id, 0.3 * box.width, TITLE);
  const regionWidth = styledWidth(region, TITLE);
  const source = shortenMiddle(picture.source, box.width - regionWidth - 28, TITLE);
  drawText(drawing, source, box.x, box.y + 20, TITLE);
  drawText(drawing, region, box.x + box.width, box.y + 20, TITLE, 'end');
  const parts = [timeText(picture.observed), ...placeParts(picture)];
  // Parts that do not fit in a narrow picture are left out from the end.
  while (parts.length > 1 && styledWidth(parts.join('   ·   '), SUBTITLE) > box.width) parts.pop();
  drawText(drawing, parts.join('   ·   '), box.x, box.y + 43, SUBTITLE);
}

/** Source, time and tool version at the foot, under a thin rule. */
export function drawFoot(drawing: Drawing, box: Rect, picture: RegionPicture): void {
  drawLine(drawing, [box.x, box.y + 0.5, box.x + box.width, box.y + 0.5], RULE_INK, 1);
  const version = `spotjoule ${shortenMiddle(picture.toolVersion, 200, SMALL_QUIET)}`;
  const time = `   ·   ${timeText(picture.observed)}`;
  const room = box.width - styledWidth(version, SMALL_QUIET) - styledWidth(time, SMALL_QUIET) - 28;
  const source = shortenMiddle(picture.source, room, SMALL_QUIET);
  drawText(drawing, source + time, box.x, box.y + 18, SMALL_QUIET);
  drawText(drawing, version, box.x + box.width, box.y + 18, SMALL_QUIET, 'end');
}

/** Lines of the note that explains the slanted figures; none where every figure is measured. */
export function noteLines(rows: readonly TableRow[], width: number): readonly string[] {
  if (!rows.some((row) => isSupposed(row.basis))) return [];
  return wrapText(SUPPOSED_NOTE, width - 6, SMALL_PRIOR);
}

export function drawNote(drawing: Drawing, box: Rect, lines: readonly string[]): void {
  lines.forEach((line, i) => {
    drawText(drawing, line, box.x, box.y + 13 + 16 * i, { ...BODY_PRIOR, sizePx: 12 });
  });
}

/** "2031-05-04 12:00:00 UTC" from an ISO time; what is not one is shown as it stands, shortened. */
function timeText(observed: string | undefined): string {
  if (observed === undefined) return 'time not stated';
  const iso = /^(\d{4}-\d\d-\d\d)T(\d\d:\d\d(?::\d\d)?)(?:\.\d+)?Z?$/.exec(observed.trim());
  if (iso) return `${iso[1]} ${iso[2]} UTC`;
  return shortenMiddle(oneLine(observed), 220, SUBTITLE);
}

function placeParts({ region, patch }: RegionPicture): readonly string[] {
  const { center } = region;
  const side = (count: number) => Math.round(count * patch.pixelMm);
  return [
    `${latitudeText(center.stonyhurstLatitudeDeg, 1)} ${longitudeText(center.stonyhurstLongitudeDeg, 1)}`,
    `μ ${center.mu.toFixed(2)}`,
    `${side(patch.nx)} × ${side(patch.ny)} Mm`,
    `pixel ${patch.pixelMm.toPrecision(3)} Mm`,
    `Carrington longitude ${center.carringtonLongitudeDeg.toFixed(1)}°`,
  ];
}
