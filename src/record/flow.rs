//! Lays text, tables and drawings down a page and on to the next.

use figure::{Anchor, Drawing, Fill, Fonts, Hatch, Point, Role, Weight};

/// The paper.
#[derive(Clone, Copy, PartialEq, Eq, Debug, Default)]
pub enum Paper {
    /// 210 × 297 mm.
    #[default]
    A4,
    /// 8.5 × 11 in.
    Letter,
}

impl Paper {
    /// Width and height, mm.
    pub const fn size(self) -> (f32, f32) {
        match self {
            Self::A4 => (210.0, 297.0),
            Self::Letter => (215.9, 279.4),
        }
    }
}

const MARGIN: f32 = 18.0;
const TOP: f32 = 20.0;
const BOTTOM: f32 = 26.0;
/// Body text, mm: 9 points.
pub const BODY: f32 = 3.175;
/// Small text, mm: 7.5 points.
pub const SMALL: f32 = 2.65;
/// Leading as a multiple of the size.
const LEADING: f32 = 1.38;

/// A column of a table.
#[derive(Clone, Copy, Debug)]
pub struct Column {
    /// Its head.
    pub head: &'static str,
    /// Its share of the width.
    pub share: f32,
    /// Whether its cells end at the right.
    pub is_number: bool,
}

/// A column whose cells begin at the left.
pub const fn words(head: &'static str, share: f32) -> Column {
    Column { head, share, is_number: false }
}

/// A column of figures.
pub const fn number(head: &'static str, share: f32) -> Column {
    Column { head, share, is_number: true }
}

/// Pages in the making.
pub struct Flow<'a> {
    pub fonts: &'a Fonts,
    paper: Paper,
    pages: Vec<Drawing>,
    y: f32,
}

impl<'a> Flow<'a> {
    /// An empty first page.
    pub fn new(paper: Paper, fonts: &'a Fonts) -> Self {
        let (width, height) = paper.size();
        Self { fonts, paper, pages: vec![Drawing::new(width, height)], y: TOP }
    }

    /// The width between the margins.
    pub fn width(&self) -> f32 {
        self.paper.size().0 - 2.0 * MARGIN
    }

    fn page(&mut self) -> &mut Drawing {
        self.pages.last_mut().expect("a flow always has a page")
    }

    fn room(&self) -> f32 {
        self.paper.size().1 - BOTTOM - self.y
    }

    /// Goes to the next page unless so much height is left.
    pub fn keep(&mut self, height: f32) {
        if self.room() < height && self.y > TOP {
            let (width, page_height) = self.paper.size();
            self.pages.push(Drawing::new(width, page_height));
            self.y = TOP;
        }
    }

    /// Leaves some height empty.
    pub fn space(&mut self, height: f32) {
        if self.y > TOP {
            self.y += height;
        }
    }

    /// The title of the whole.
    pub fn title(&mut self, text: &str) {
        self.lines(text, 6.2, Weight::SemiBold, Role::Ink);
    }

    /// The heading of a section, never alone at the foot of a page.
    pub fn heading(&mut self, text: &str) {
        self.space(4.5);
        self.keep(24.0);
        self.lines(text, 4.1, Weight::SemiBold, Role::Ink);
        let (y, width) = (self.y + 0.2, self.width());
        self.page().line(&[point(MARGIN, y), point(MARGIN + width, y)], Role::Rule, 0.25);
        self.y += 2.0;
    }

    /// The heading of a part of a section.
    pub fn subheading(&mut self, text: &str) {
        self.space(2.2);
        self.keep(16.0);
        self.lines(text, BODY, Weight::SemiBold, Role::Ink);
    }

    /// A paragraph of body text.
    pub fn paragraph(&mut self, text: &str) {
        self.lines(text, BODY, Weight::Regular, Role::Ink);
    }

    /// A paragraph of small text.
    pub fn small(&mut self, text: &str) {
        self.lines(text, SMALL, Weight::Regular, Role::Faint);
    }

    fn lines(&mut self, text: &str, size: f32, weight: Weight, role: Role) {
        let leading = size * LEADING;
        for line in self.fonts.wrap(text, size, weight, self.width()) {
            self.keep(leading);
            self.y += leading;
            let place = point(MARGIN, self.y - (leading - size) / 2.0 - size * 0.2);
            match weight {
                Weight::Regular => self.page().text(place, line, size, Anchor::Start, role),
                Weight::SemiBold => self.page().strong(place, line, size, Anchor::Start, role),
            }
        }
    }

    /// Pairs of name and value in two columns; a pair whose value is long takes both.
    pub fn pairs(&mut self, pairs: &[(&str, String)]) {
        let half = self.width() / 2.0;
        let name_width = 34.0;
        let mut column = 0;
        let mut row_height: f32 = 0.0;
        for (name, value) in pairs {
            let is_long = self.fonts.width(value, BODY, Weight::Regular) > half - name_width - 3.0;
            if column == 1 && is_long {
                self.y += row_height;
                column = 0;
            }
            let value_width = if is_long { self.width() - name_width } else { half - name_width };
            let lines = self.fonts.wrap(value, BODY, Weight::Regular, value_width);
            let height = lines.len() as f32 * BODY * LEADING;
            if column == 0 {
                self.keep(height);
                row_height = 0.0;
            }
            row_height = row_height.max(height);
            let x = MARGIN + column as f32 * half;
            let base = self.y + BODY * 1.05;
            self.page().text(point(x, base), *name, BODY, Anchor::Start, Role::Faint);
            for (index, line) in lines.iter().enumerate() {
                let y = base + index as f32 * BODY * LEADING;
                self.page().text(point(x + name_width, y), line, BODY, Anchor::Start, Role::Ink);
            }
            if column == 1 || is_long {
                self.y += row_height;
                column = 0;
            } else {
                column = 1;
            }
        }
        if column == 1 {
            self.y += row_height;
        }
        self.y += 1.0;
    }

    /// A table. The head stands again on every page; a row is never split; a long cell wraps.
    pub fn table(&mut self, columns: &[Column], rows: &[Vec<String>]) {
        let total: f32 = columns.iter().map(|column| column.share).sum();
        let widths: Vec<f32> = columns.iter().map(|column| column.share / total * self.width()).collect();
        self.keep(14.0);
        self.table_head(columns, &widths);
        for row in rows {
            let cells: Vec<Vec<String>> = row
                .iter()
                .zip(&widths)
                .map(|(cell, width)| self.fonts.wrap(cell, SMALL, Weight::Regular, width - 2.0))
                .collect();
            let lines = cells.iter().map(Vec::len).max().unwrap_or(1);
            let height = lines as f32 * SMALL * LEADING + 1.0;
            let pages = self.pages.len();
            self.keep(height);
            if self.pages.len() > pages {
                self.table_head(columns, &widths);
            }
            let mut x = MARGIN;
            for ((cell, width), column) in cells.iter().zip(&widths).zip(columns) {
                for (index, line) in cell.iter().enumerate() {
                    let y = self.y + SMALL * 1.15 + index as f32 * SMALL * LEADING;
                    let (place, anchor) =
                        if column.is_number { (x + width - 1.0, Anchor::End) } else { (x + 1.0, Anchor::Start) };
                    self.page().text(point(place, y), line, SMALL, anchor, Role::Ink);
                }
                x += width;
            }
            self.y += height;
            let (y, width) = (self.y - 0.25, self.width());
            self.page().line(&[point(MARGIN, y), point(MARGIN + width, y)], Role::Rule, 0.1);
        }
        self.y += 1.5;
    }

    fn table_head(&mut self, columns: &[Column], widths: &[f32]) {
        let mut x = MARGIN;
        let lines: Vec<Vec<String>> = columns
            .iter()
            .zip(widths)
            .map(|(column, width)| self.fonts.wrap(column.head, SMALL, Weight::SemiBold, width - 2.0))
            .collect();
        let count = lines.iter().map(Vec::len).max().unwrap_or(1);
        for ((column, width), lines) in columns.iter().zip(widths).zip(&lines) {
            for (index, line) in lines.iter().enumerate() {
                let y = self.y + SMALL * 1.15 + (count - lines.len() + index) as f32 * SMALL * LEADING;
                let (place, anchor) =
                    if column.is_number { (x + width - 1.0, Anchor::End) } else { (x + 1.0, Anchor::Start) };
                self.page().strong(point(place, y), line, SMALL, anchor, Role::Faint);
            }
            x += width;
        }
        self.y += count as f32 * SMALL * LEADING + 0.8;
        let (y, width) = (self.y - 0.25, self.width());
        self.page().line(&[point(MARGIN, y), point(MARGIN + width, y)], Role::Ink, 0.25);
    }

    /// A drawing of the full width, kept whole.
    pub fn drawing(&mut self, drawing: &Drawing) {
        self.keep(drawing.height + 1.0);
        let corner = point(MARGIN, self.y);
        self.page().place(corner, drawing);
        self.y += drawing.height + 1.0;
    }

    /// A mark with a sentence behind it in the heavier weight.
    pub fn answer(&mut self, mark: figure::AnswerMark, sentence: &str) {
        let size = BODY * 1.08;
        let indent = 6.0;
        let lines = self.fonts.wrap(sentence, size, Weight::SemiBold, self.width() - indent);
        self.keep(lines.len() as f32 * size * LEADING + 2.0);
        let y = self.y;
        figure::draw_mark(self.page(), mark, point(MARGIN + 2.0, y + size * 0.75), size);
        for line in lines {
            let y = self.y + size * 1.1;
            self.page().strong(point(MARGIN + indent, y), line, size, Anchor::Start, Role::Ink);
            self.y += size * LEADING;
        }
        self.y += 0.8;
    }

    /// Lines to sign on: what for, with the names that are known.
    pub fn sign_off(&mut self, rows: &[[String; 4]]) {
        const HEIGHT: f32 = 13.0;
        self.keep(rows.len() as f32 * HEIGHT + 6.0);
        let heads = ["", "name", "role", "date", "signature"];
        let shares = [0.15, 0.25, 0.2, 0.14, 0.26];
        let width = self.width();
        for row in rows {
            let mut x = MARGIN;
            let y = self.y + HEIGHT - 3.5;
            for (index, share) in shares.iter().enumerate() {
                let cell = row.get(index).cloned().unwrap_or_default();
                if index == 0 {
                    self.page().strong(point(x, y), cell, BODY, Anchor::Start, Role::Ink);
                } else {
                    self.page().text(point(x + 1.0, y - 0.6), cell, BODY, Anchor::Start, Role::Ink);
                    self.page().line(&[point(x, y + 0.7), point(x + share * width - 3.0, y + 0.7)], Role::Ink, 0.2);
                    self.page().text(point(x, y + 3.4), heads[index], 2.3, Anchor::Start, Role::Faint);
                }
                x += share * width;
            }
            self.y += HEIGHT;
        }
    }

    /// An empty box to write in, as high as a line, at a place of the present row; used by lists that are filled in by hand.
    pub fn boxed_note(&mut self, height: f32, note: &str) {
        self.keep(height);
        let (y, width) = (self.y, self.width());
        let ground = Fill { role: Role::Ground, hatch: Hatch::Plain };
        self.page().rectangle(point(MARGIN, y), width, height, ground);
        self.page().outline(point(MARGIN, y), width, height, Role::Rule, 0.2);
        self.page().text(point(MARGIN + 1.5, y + 3.4), note, 2.3, Anchor::Start, Role::Faint);
        self.y += height + 2.0;
    }

    /// Puts head and foot on every page and gives the pages.
    pub fn finish(mut self, head: &str, foot: &str, caution: &str) -> Vec<Drawing> {
        let (width, height) = self.paper.size();
        let count = self.pages.len();
        let cautions = self.fonts.wrap(caution, 2.3, Weight::Regular, width - 2.0 * MARGIN);
        for (index, page) in self.pages.iter_mut().enumerate() {
            page.text(point(MARGIN, 12.0), head, 2.5, Anchor::Start, Role::Faint);
            page.text(
                point(width - MARGIN, 12.0),
                format!("page {} of {count}", index + 1),
                2.5,
                Anchor::End,
                Role::Faint,
            );
            page.line(&[point(MARGIN, 13.8), point(width - MARGIN, 13.8)], Role::Rule, 0.2);
            page.line(&[point(MARGIN, height - 21.5), point(width - MARGIN, height - 21.5)], Role::Rule, 0.2);
            for (line, text) in cautions.iter().enumerate() {
                let y = height - 18.3 + line as f32 * 3.2;
                page.text(point(MARGIN, y), text, 2.3, Anchor::Start, Role::Faint);
            }
            page.text(point(MARGIN, height - 7.5), foot, 2.3, Anchor::Start, Role::Faint);
        }
        self.pages
    }
}

fn point(x: f32, y: f32) -> Point {
    Point { x, y }
}
