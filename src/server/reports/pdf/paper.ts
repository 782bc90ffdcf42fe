import { paperWords } from '../../../words/papers-handover';
import PDFDocument from 'pdfkit';
import { PAPER } from '../../../drawings/paint';
import { runsOf, type Run, type Weight } from './faces';

/** A4 upright, in points. */
const PAGE = { width: 595.28, height: 841.89 };
const MARGIN = { left: 54, right: 54, top: 62, bottom: 66 };
const WIDTH = PAGE.width - MARGIN.left - MARGIN.right;

export interface TextStyle {
  size?: number;
  weight?: Weight;
  colour?: string;
  align?: 'left' | 'right';
  /** Height of a line as a multiple of the size. */
  leading?: number;
}
export interface PaperColumn {
  header: string;
  /** Share of the width. */
  share: number;
  align?: 'left' | 'right';
}
interface Word {
  runs: Run[];
  width: number;
}
type Pen = InstanceType<typeof PDFDocument>;

/**
 * A document on paper: text flows down the page, tables break between rows and repeat their head, a heading never
 * stands alone at the foot. Headings become the bookmarks.
 */
export class Paper {
  readonly pen: Pen;
  private y = MARGIN.top;
  private readonly chunks: Buffer[] = [];
  private readonly ended: Promise<void>;

  constructor(
    about: { title: string; author: string; at: Date },
    private readonly lines: { head: string; foot: string },
  ) {
    this.pen = new PDFDocument({
      size: 'A4',
      margins: { ...MARGIN, bottom: 0 }, // breaks are ours
      bufferPages: true,
      autoFirstPage: false,
      pdfVersion: '1.7',
      lang: 'en',
      displayTitle: true,
      info: {
        Title: about.title,
        Author: about.author,
        Creator: 'Wakeline',
        CreationDate: about.at,
        ModDate: about.at,
      },
    });
    this.pen.on('data', (chunk: Buffer) => this.chunks.push(chunk));
    this.ended = new Promise((resolve, reject) => {
      this.pen.on('end', resolve);
      this.pen.on('error', reject);
    });
    this.newPage();
  }

  get width(): number {
    return WIDTH;
  }
  get left(): number {
    return MARGIN.left;
  }
  get top(): number {
    return this.y;
  }

  newPage(): void {
    this.pen.addPage();
    this.y = MARGIN.top;
  }
  space(points: number): void {
    this.y += points;
  }
  /** Begins a page where fewer than `points` are left. */
  need(points: number): void {
    if (this.y + points > PAGE.height - MARGIN.bottom) this.newPage();
  }
  /** Takes `height` points of the page for a drawing; `draw` gets the upper left corner. */
  figure(height: number, draw: (x: number, y: number) => void): void {
    this.need(height);
    draw(MARGIN.left, this.y);
    this.y += height;
  }

  private measure(runs: readonly Run[], size: number): number {
    return runs.reduce((sum, run) => sum + this.use(run, size).widthOfString(run.text), 0);
  }
  private use(run: Run, size: number): Pen {
    try {
      return this.pen.font(run.face.name).fontSize(size);
    } catch {
      return this.pen.registerFont(run.face.name, run.face.data).font(run.face.name).fontSize(size);
    }
  }

  /** Text broken into lines of at most `width`; a word that is wider than a line is cut where it must. */
  private broken(text: string, width: number, style: TextStyle): Word[][] {
    const { size = 10, weight = 400 } = style;
    const blank = this.measure(runsOf(' ', weight), size);
    const lines: Word[][] = [];
    for (const paragraph of text.split('\n')) {
      let line: Word[] = [];
      let used = 0;
      const push = (word: Word): void => {
        const wanted = (line.length > 0 ? blank : 0) + word.width;
        if (line.length > 0 && used + wanted > width) {
          lines.push(line);
          line = [];
          used = 0;
        }
        used += (line.length > 0 ? blank : 0) + word.width;
        line.push(word);
      };
      for (const part of paragraph.split(' ').filter((p) => p !== '')) {
        for (const piece of this.cut(part, width, style)) push(piece);
      }
      lines.push(line);
    }
    return lines;
  }
  private cut(word: string, width: number, { size = 10, weight = 400 }: TextStyle): Word[] {
    const whole = runsOf(word, weight);
    const wide = this.measure(whole, size);
    if (wide <= width) return [{ runs: whole, width: wide }];
    const pieces: Word[] = [];
    let rest = '';
    for (const sign of word) {
      if (rest !== '' && this.measure(runsOf(rest + sign, weight), size) > width) {
        const runs = runsOf(rest, weight);
        pieces.push({ runs, width: this.measure(runs, size) });
        rest = '';
      }
      rest += sign;
    }
    const runs = runsOf(rest, weight);
    pieces.push({ runs, width: this.measure(runs, size) });
    return pieces;
  }

  heightOf(text: string, width = WIDTH, style: TextStyle = {}): number {
    const { size = 10, leading = 1.4 } = style;
    return this.broken(text, width, style).length * size * leading;
  }

  /** Sets text at a place, without moving on. @returns its height */
  setAt(text: string, x: number, y: number, width: number, style: TextStyle = {}): number {
    const { size = 10, weight = 400, colour = PAPER.ink, align = 'left', leading = 1.4 } = style;
    const blank = this.measure(runsOf(' ', weight), size);
    const lines = this.broken(text, width, style);
    lines.forEach((line, i) => {
      const wide = line.reduce((sum, w) => sum + w.width, 0) + blank * Math.max(0, line.length - 1);
      let at = align === 'right' ? x + width - wide : x;
      for (const word of line) {
        for (const run of word.runs) {
          const pen = this.use(run, size).fillColor(colour);
          pen.text(run.text, at, y + i * size * leading, { lineBreak: false });
          at += pen.widthOfString(run.text);
        }
        at += blank;
      }
    });
    return lines.length * size * leading;
  }

  text(text: string, style: TextStyle = {}): void {
    const { size = 10, leading = 1.4 } = style;
    const lines = this.broken(text, WIDTH, style);
    // line by line, so that a long text goes on over the page's end
    for (const line of lines) {
      this.need(size * leading);
      const words = line.map((w) => w.runs.map((r) => r.text).join('')).join(' ');
      if (words) this.setAt(words, MARGIN.left, this.y, WIDTH + 1, style);
      this.y += size * leading;
    }
    this.y += size * 0.5;
  }

  /** @param keep points that must fit under it on the same page */
  heading(text: string, level: 1 | 2 | 3, keep = { 1: 120, 2: 100, 3: 70 }[level]): void {
    const size = { 1: 17, 2: 12.5, 3: 10.5 }[level];
    this.y += { 1: 14, 2: 12, 3: 6 }[level];
    this.need(size * 1.3 + keep);
    if (level === 1) {
      this.pen
        .moveTo(MARGIN.left, this.y)
        .lineTo(MARGIN.left + WIDTH, this.y)
        .lineWidth(1.4)
        .strokeColor(PAPER.ink)
        .stroke();
      this.y += 8;
    }
    if (level < 3) this.pen.outline.addItem(text);
    this.y += this.setAt(text, MARGIN.left, this.y, WIDTH, { size, weight: 600, leading: 1.3 }) + 4;
  }

  /** Names and values in two columns. */
  facts(pairs: readonly (readonly [string, string])[]): void {
    const name = 150;
    for (const [label, value] of pairs) {
      const shown = value || paperWords.notEntered;
      const height = Math.max(
        this.heightOf(label, name - 10, { size: 9.5 }),
        this.heightOf(shown, WIDTH - name, { size: 9.5 }),
      );
      this.need(height + 5);
      this.setAt(label, MARGIN.left, this.y, name - 10, { size: 9.5, colour: PAPER.ink2 });
      this.setAt(shown, MARGIN.left + name, this.y, WIDTH - name, { size: 9.5 });
      this.y += height + 5;
      this.rule(this.y - 3);
    }
    this.y += 6;
  }
  private rule(y: number, colour = PAPER.ruleFaint): void {
    this.pen
      .moveTo(MARGIN.left, y)
      .lineTo(MARGIN.left + WIDTH, y)
      .lineWidth(0.5)
      .strokeColor(colour)
      .stroke();
  }

  table(
    columns: readonly PaperColumn[],
    rows: readonly (readonly string[])[],
    none = paperWords.noneRecorded,
  ): void {
    if (rows.length === 0) {
      this.text(none, { colour: PAPER.ink2 });
      return;
    }
    const total = columns.reduce((sum, c) => sum + c.share, 0);
    const widths = columns.map((c) => (c.share / total) * WIDTH);
    const gap = 8;
    const style = { size: 8.5, leading: 1.32 };
    const row = (cells: readonly string[], look: TextStyle): number => {
      let x = MARGIN.left;
      let height = 0;
      cells.forEach((cell, i) => {
        const width = widths[i] ?? 0;
        const last = i === cells.length - 1;
        height = Math.max(
          height,
          this.setAt(cell, x, this.y, width - (last ? 0 : gap), {
            ...style,
            ...look,
            align: columns[i]?.align ?? 'left',
          }),
        );
        x += width;
      });
      return height;
    };
    const head = (): void => {
      this.y +=
        row(
          columns.map((c) => c.header),
          { colour: PAPER.ink2, weight: 600 },
        ) + 2;
      this.rule(this.y, PAPER.ink3);
      this.y += 3;
    };
    const heightOfRow = (cells: readonly string[]): number =>
      Math.max(
        ...cells.map((cell, i) =>
          this.heightOf(cell, (widths[i] ?? 0) - (i === cells.length - 1 ? 0 : gap), style),
        ),
      );
    this.need(28 + heightOfRow(rows[0] ?? []));
    head();
    for (const cells of rows) {
      if (this.y + heightOfRow(cells) + 5 > PAGE.height - MARGIN.bottom) {
        this.newPage();
        head();
      }
      this.y += row(cells, {}) + 2.5;
      this.rule(this.y);
      this.y += 2.5;
    }
    this.y += 8;
  }

  /** A safety caution: ink ground, the triangle's yellow. */
  caution(strong: string, words: string): void {
    const bold = { size: 9.5, weight: 600 } as const;
    const strongHeight = this.heightOf(strong, WIDTH - 52, bold);
    const height = strongHeight + this.heightOf(words, WIDTH - 52, { size: 9.5 }) + 18;
    this.figure(height + 8, (x, y) => {
      this.pen.roundedRect(x, y, WIDTH, height, 3).fill(PAPER.ink);
      const mark = { x: x + 14, y: y + height / 2 - 8 };
      this.pen
        .moveTo(mark.x + 9, mark.y)
        .lineTo(mark.x + 18, mark.y + 15.5)
        .lineTo(mark.x, mark.y + 15.5)
        .closePath()
        .lineWidth(1.4)
        .strokeColor('#f5c518')
        .stroke();
      this.pen
        .moveTo(mark.x + 9, mark.y + 5.2)
        .lineTo(mark.x + 9, mark.y + 10)
        .stroke();
      this.pen.circle(mark.x + 9, mark.y + 12.7, 0.9).fill('#f5c518');
      this.setAt(strong, x + 42, y + 9, WIDTH - 52, { ...bold, colour: '#ffffff' });
      this.setAt(words, x + 42, y + 9 + strongHeight, WIDTH - 52, { size: 9.5, colour: '#ffffff' });
    });
  }

  /** Ends the document: head, foot and page numbers on every page. */
  async end(): Promise<Buffer> {
    const { start, count } = this.pen.bufferedPageRange();
    for (let i = 0; i < count; i++) {
      this.pen.switchToPage(start + i);
      const style = { size: 8, colour: PAPER.ink2 };
      if (i > 0) this.setAt(this.lines.head, MARGIN.left, 34, WIDTH, style);
      const foot = PAGE.height - 44;
      this.rule(foot - 6);
      this.setAt(this.lines.foot, MARGIN.left, foot, WIDTH - 70, style);
      this.setAt(paperWords.page(i + 1, count), MARGIN.left + WIDTH - 70, foot, 70, {
        ...style,
        align: 'right',
      });
    }
    this.pen.end();
    await this.ended;
    return Buffer.concat(this.chunks);
  }
}
