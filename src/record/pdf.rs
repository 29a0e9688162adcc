//! Drawings to a PDF file: fonts embedded, bytes the same every time.

use std::fmt;

use figure::{Anchor, Drawing, Fonts, Mark, Palette, Point, REGULAR, Role, SEMI_BOLD, Weight};
use printpdf::{
    Color, FontId, Line, LineCapStyle, LineDashPattern, LinePoint, Mm, Op, PaintMode, ParsedFont, PdfDocument, PdfFont,
    PdfFontHandle, PdfPage, PdfSaveOptions, Polygon, PolygonRing, Pt, Rgb, TextItem, WindingOrder,
};

use crate::Record;

/// Why a record cannot be printed.
#[derive(Clone, PartialEq, Eq, Debug)]
pub enum RecordRefusal {
    /// A character that no font of the program has.
    NoGlyph {
        /// The character.
        character: char,
        /// The line it stands in.
        line: String,
        /// The page, from 1.
        page: usize,
    },
    /// The file could not be made.
    File(String),
}

impl fmt::Display for RecordRefusal {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::NoGlyph { character, line, page } => write!(
                f,
                "The character {character} (U+{:04X}) cannot be printed; it stands on page {page} in \"{line}\". Write it in Latin letters.",
                u32::from(*character)
            ),
            Self::File(why) => write!(f, "The record cannot be made: {why}."),
        }
    }
}

impl std::error::Error for RecordRefusal {}

const PT_PER_MM: f32 = 72.0 / 25.4;

pub(crate) fn to_pdf(record: &Record) -> Result<Vec<u8>, RecordRefusal> {
    let fonts = Fonts::new();
    check_characters(record, &fonts)?;
    let mut document = PdfDocument::new(&record.title);
    for (name, bytes) in [(name_of(Weight::Regular), REGULAR), (name_of(Weight::SemiBold), SEMI_BOLD)] {
        let font = ParsedFont::from_bytes(bytes, 0, &mut Vec::new())
            .ok_or_else(|| RecordRefusal::File("a font file of the program cannot be read".into()))?;
        document.resources.fonts.map.insert(FontId(name.into()), PdfFont::new(font));
    }
    // The day given by the caller stands for every date in the file, so that the same record has the same bytes.
    let day = record.date.strftime("D:%Y%m%d000000+00'00'").to_string();
    let day = printpdf::parse_pdf_date(&day).map_err(|error| RecordRefusal::File(error.to_string()))?;
    let info = &mut document.metadata.info;
    info.creation_date = day;
    info.modification_date = day;
    info.metadata_date = day;
    info.producer = format!("Slidehalt {}", record.version);
    info.creator = info.producer.clone();
    let pages =
        record.pages.iter().map(|page| PdfPage::new(Mm(page.width), Mm(page.height), page_ops(page, &fonts))).collect();
    document.with_pages(pages);
    let mut file = document.to_lopdf_document(&PdfSaveOptions::default(), &mut Vec::new());
    seal_identity(&mut file, record);
    let mut bytes = Vec::new();
    file.compress();
    file.save_to(&mut bytes).map_err(|error| RecordRefusal::File(error.to_string()))?;
    Ok(bytes)
}

fn name_of(weight: Weight) -> &'static str {
    match weight {
        Weight::Regular => "PlexRegular",
        Weight::SemiBold => "PlexSemiBold",
    }
}

/// The library takes the file's identity from a counter; ours comes from what the file says.
fn seal_identity(file: &mut lopdf::Document, record: &Record) {
    // FNV-1a, twice from different starts: no secret, only the same for the same text.
    let text = record.to_text() + &record.title + &record.version;
    let hash =
        |start: u64| text.bytes().fold(start, |hash, byte| (hash ^ u64::from(byte)).wrapping_mul(0x0100_0000_01b3));
    let mut identity = hash(0xcbf2_9ce4_8422_2325).to_be_bytes().to_vec();
    identity.extend(hash(0x9ae1_6a3b_2f90_404f).to_be_bytes());
    let identity = lopdf::Object::String(identity, lopdf::StringFormat::Hexadecimal);
    file.trailer.set("ID", lopdf::Object::Array(vec![identity.clone(), identity]));
}

fn check_characters(record: &Record, fonts: &Fonts) -> Result<(), RecordRefusal> {
    for (index, page) in record.pages.iter().enumerate() {
        for text in page.texts() {
            if let Some(character) = fonts.missing(&text.text, text.weight).first() {
                return Err(RecordRefusal::NoGlyph { character: *character, line: text.text.clone(), page: index + 1 });
            }
        }
    }
    Ok(())
}

fn page_ops(page: &Drawing, fonts: &Fonts) -> Vec<Op> {
    let place =
        |point: &Point| LinePoint { p: printpdf::Point::new(Mm(point.x), Mm(page.height - point.y)), bezier: false };
    let mut ops = vec![Op::SetLineCapStyle { cap: LineCapStyle::Butt }];
    for mark in &page.marks {
        match mark {
            Mark::Line { points, role, width, is_dashed } => {
                let dash = if *is_dashed { LineDashPattern::new(0.0, &[3.0, 2.0]) } else { LineDashPattern::solid() };
                ops.push(Op::SetLineDashPattern { dash });
                ops.push(Op::SetOutlineColor { col: colour(*role) });
                ops.push(Op::SetOutlineThickness { pt: Pt(width * PT_PER_MM) });
                ops.push(Op::DrawLine { line: Line { points: points.iter().map(place).collect(), is_closed: false } });
            }
            Mark::Area { points, role } => {
                ops.push(Op::SetFillColor { col: colour(*role) });
                let ring = PolygonRing { points: points.iter().map(place).collect() };
                let polygon =
                    Polygon { rings: vec![ring], mode: PaintMode::Fill, winding_order: WindingOrder::NonZero };
                ops.push(Op::DrawPolygon { polygon });
            }
            Mark::Text(text) => {
                if text.text.is_empty() {
                    continue;
                }
                let width = fonts.width(&text.text, text.size, text.weight);
                let left = match text.anchor {
                    Anchor::Start => text.at.x,
                    Anchor::Middle => text.at.x - width / 2.0,
                    Anchor::End => text.at.x - width,
                };
                ops.push(Op::StartTextSection);
                ops.push(Op::SetFillColor { col: colour(text.role) });
                let font = PdfFontHandle::External(FontId(name_of(text.weight).into()));
                ops.push(Op::SetFont { font, size: Pt(text.size * PT_PER_MM) });
                ops.push(Op::SetTextCursor { pos: printpdf::Point::new(Mm(left), Mm(page.height - text.at.y)) });
                ops.push(Op::ShowText { items: vec![TextItem::Text(text.text.clone())] });
                ops.push(Op::EndTextSection);
            }
        }
    }
    ops
}

fn colour(role: Role) -> Color {
    let [r, g, b] = Palette::Print.colour(role).map(|channel| f32::from(channel) / 255.0);
    Color::Rgb(Rgb::new(r, g, b, None))
}
