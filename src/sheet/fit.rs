//! Text into a place of given size: at its own height, on several lines, smaller, or cut.

use std::sync::Arc;

use super::{Extent, Misfit, Spot};
use crate::geom::{COINCIDENT, Rect, Sheet};
use crate::ident::ItemId;
use crate::source::Span;
use crate::style::LinePitch;
use crate::text::Run;

/// What stands at the end of a text that was cut.
const CUT: char = '…';

/// Room for a text, mm: as wide as its longest line may be, and as high as from the top of its
/// first capitals to its last base line.
#[derive(Clone, Copy, Debug)]
pub(super) struct Room {
    pub width: f64,
    pub height: f64,
}

/// A text in lines that fit their room.
#[derive(Clone, Debug)]
pub(super) struct Fitted {
    /// Its lines from top to bottom; none for a blank text.
    pub lines: Vec<Arc<Run>>,
    /// Its text height.
    pub height: f64,
    /// Base line to base line, mm.
    pub pitch: f64,
    /// Why it had to be cut, if it was.
    pub shortage: Option<Shortage>,
}

/// Room that a cut text would have needed.
#[derive(Clone, Copy, Debug)]
pub(super) struct Shortage {
    pub extent: Extent,
    pub needed: f64,
    pub available: f64,
}

/// Where a text belongs, for the finding if it has no room there.
#[derive(Clone, Copy, Debug)]
pub(super) struct Slot<'a> {
    pub item: &'a ItemId,
    pub spot: Spot,
    pub place: Rect<Sheet>,
    pub span: Option<Span>,
}

/// Heights from `first` down through the smaller ones of a style's list.
pub(super) fn heights_from(first: f64, list: &[f64]) -> Vec<f64> {
    let smaller = list.iter().copied().filter(|h| *h < first - COINCIDENT);
    std::iter::once(first).chain(smaller).collect()
}

/// `text` in `room` at the first of `heights` at which it fits, on as many lines as there is room
/// for. At the last height it is cut.
pub(super) fn fit(text: &str, room: Room, heights: &[f64], line_pitch: LinePitch) -> Fitted {
    let mut least = Vec::new();
    let mut at = (0.0, 0.0, 1);
    for &height in heights {
        let lines = wrap(text, height, room.width);
        let pitch = pitch(&lines, height, line_pitch);
        let most = most_lines(room.height, height, pitch);
        if lines.len() <= most && lines.iter().all(|l| width(l) <= room.width + COINCIDENT) {
            return Fitted { lines: shared(lines), height, pitch, shortage: None };
        }
        at = (height, pitch, most.max(1));
        least = lines;
    }
    let (height, pitch, most) = at;
    let shortage = Some(shortage(&least, room, at));
    Fitted { lines: shared(cut(&least, most, room.width)), height, pitch, shortage }
}

/// Base line to base line of these lines, mm.
pub(super) fn pitch(lines: &[Run], height: f64, pitch: LinePitch) -> f64 {
    // Stems of lower case may rise a little over the capitals, accents by a quarter and more.
    let accented = |l: &Run| -l.ink.min.y > 1.15 * height;
    let below = lines.iter().skip(1).any(accented);
    height * if below { pitch.accented } else { pitch.plain }
}

/// `text` in lines no wider than `width`; a word that alone is wider is broken.
pub(super) fn broken(text: &str, height: f64, room: f64) -> Vec<Run> {
    let mut lines = Vec::new();
    for line in wrap(text, height, room) {
        let mut rest = line.text.as_str();
        loop {
            // One letter stands on each line even where the room is narrower than it.
            let first = rest.chars().next().map_or(0, char::len_utf8);
            let end = last_that_fits(rest, "", height, room).max(first);
            if end == rest.len() {
                break;
            }
            let (head, tail) = rest.split_at(end);
            lines.push(Run::new(head, height));
            rest = tail;
        }
        lines.push(Run::new(rest, height));
    }
    lines
}

/// The first `most` lines, the last of them with a mark that something is missing.
pub(super) fn cut(lines: &[Run], most: usize, room: f64) -> Vec<Run> {
    let sticks_out = lines.iter().position(|l| width(l) > room + COINCIDENT);
    let last = sticks_out.unwrap_or(lines.len()).min(most.saturating_sub(1));
    let Some(rest) = lines.get(last..).filter(|rest| !rest.is_empty()) else {
        return lines.to_vec();
    };
    let words: Vec<&str> = rest.iter().map(|l| l.text.as_str()).collect();
    let mut kept = lines[..last].to_vec();
    kept.push(shortened(&words.join(" "), rest[0].height, room));
    kept
}

/// Width of a line's ink from its beginning, mm.
pub(super) fn width(line: &Run) -> f64 {
    line.ink.max.x
}

impl Fitted {
    /// Top of the first capitals to the last base line, mm.
    pub(super) fn used(&self) -> f64 {
        self.height + self.lines.len().saturating_sub(1) as f64 * self.pitch
    }

    /// The misfit that a cut text makes at its slot.
    pub(super) fn misfit(&self, slot: &Slot<'_>, text: &str) -> Option<Misfit> {
        self.shortage.map(|s| s.at(slot, text))
    }
}

impl Shortage {
    /// The misfit of `text` at its slot.
    pub(super) fn at(self, slot: &Slot<'_>, text: &str) -> Misfit {
        Misfit {
            item: slot.item.clone(),
            spot: slot.spot,
            text: text.to_owned(),
            place: slot.place,
            extent: self.extent,
            needed: self.needed,
            available: self.available,
            span: slot.span,
        }
    }
}

fn shared(lines: Vec<Run>) -> Vec<Arc<Run>> {
    lines.into_iter().map(Arc::new).collect()
}

/// How many lines of this height have room above each other.
fn most_lines(room: f64, height: f64, pitch: f64) -> usize {
    let spare = room + COINCIDENT - height;
    if spare < 0.0 { 0 } else { (spare / pitch).floor() as usize + 1 }
}

/// Why the lines do not fit: one of them sticks out, or there is room for one only and there are
/// more, or they are too many.
fn shortage(lines: &[Run], room: Room, (height, pitch, most): (f64, f64, usize)) -> Shortage {
    let widest = lines.iter().map(width).fold(0.0, f64::max);
    let (extent, needed, available) = if widest > room.width + COINCIDENT {
        (Extent::Width, widest, room.width)
    } else if most == 1 && lines.len() > 1 {
        let words: Vec<&str> = lines.iter().map(|l| l.text.as_str()).collect();
        (Extent::Width, width(&Run::new(&words.join(" "), height)), room.width)
    } else {
        let steps = lines.len().saturating_sub(1) as f64;
        (Extent::Height, height + steps * pitch, room.height)
    };
    Shortage { extent, needed, available }
}

/// `text` in lines of whole words, as many on each as `room` takes; a wider word stands alone. A
/// no-break blank joins two words into one.
fn wrap(text: &str, height: f64, room: f64) -> Vec<Run> {
    let whole = Run::new(text.trim(), height);
    if whole.is_blank() || width(&whole) <= room + COINCIDENT {
        return if whole.is_blank() { Vec::new() } else { vec![whole] };
    }
    let blank = Run::new(" ", height).advance;
    let mut lines: Vec<String> = Vec::new();
    // The font has no kerning, so a line is as wide as its words and the blanks between them.
    let mut at = 0.0;
    for word in text.split([' ', '\t', '\n', '\r']).filter(|w| !w.is_empty()) {
        let run = Run::new(word, height);
        match lines.last_mut() {
            Some(line) if at + blank + width(&run) <= room + COINCIDENT => {
                line.push(' ');
                line.push_str(word);
                at += blank + run.advance;
            }
            Some(_) | None => {
                lines.push(word.to_owned());
                at = run.advance;
            }
        }
    }
    lines.iter().map(|line| Run::new(line, height)).collect()
}

/// `text` cut after the last word or, where that would leave less than half a line, the last
/// letter that fits with the mark of cutting.
fn shortened(text: &str, height: f64, room: f64) -> Run {
    let mut mark = [0; 4];
    let mark = CUT.encode_utf8(&mut mark);
    let end = last_that_fits(text, mark, height, room);
    let letters = &text[..end];
    let at_word = text[end..].starts_with(' ').then_some(end);
    let word_end = at_word.or_else(|| letters.rfind(' ').filter(|i| *i * 2 > end));
    // A comma or colon that leads on to what is missing would look odd before the mark.
    let kept = text[..word_end.unwrap_or(end)].trim_end_matches([' ', ',', ';', ':']);
    Run::new(&format!("{kept}{mark}"), height)
}

/// Byte at which the longest beginning of `text` that fits with `tail` after it ends; 0 if not even
/// its first letter does.
fn last_that_fits(text: &str, tail: &str, height: f64, room: f64) -> usize {
    let tail = Run::new(tail, height);
    let mut letter = [0; 4];
    let (mut at, mut end) = (0.0, 0);
    for c in text.chars() {
        let run = Run::new(c.encode_utf8(&mut letter), height);
        let ink_end = if tail.is_blank() { width(&run) } else { run.advance + width(&tail) };
        if at + ink_end > room + COINCIDENT {
            break;
        }
        at += run.advance;
        end += c.len_utf8();
    }
    end
}

#[cfg(test)]
mod tests {
    use super::*;

    const HEIGHTS: [f64; 3] = [5.0, 3.5, 2.5];
    const PITCH: LinePitch = LinePitch { plain: 1.5, accented: 1.9 };

    fn texts(f: &Fitted) -> Vec<&str> {
        f.lines.iter().map(|l| l.text.as_str()).collect()
    }

    #[test]
    fn a_text_that_fits_keeps_its_height_and_stands_on_one_line() {
        let f = fit("Bracket", Room { width: 68.0, height: 9.0 }, &HEIGHTS, PITCH);
        assert_eq!((f.height, texts(&f)), (5.0, vec!["Bracket"]));
        assert!(f.shortage.is_none());
    }

    #[test]
    fn lines_are_preferred_to_a_smaller_height_and_that_to_a_cut() {
        let long = "Bearing pedestal";
        let two = fit(long, Room { width: 40.0, height: 12.5 }, &HEIGHTS, PITCH);
        assert_eq!((two.height, texts(&two)), (5.0, vec!["Bearing", "pedestal"]));
        let small = fit(long, Room { width: 45.0, height: 5.0 }, &HEIGHTS, PITCH);
        assert_eq!((small.height, texts(&small)), (3.5, vec![long]));
        let tiny = fit(long, Room { width: 25.0, height: 5.0 }, &HEIGHTS, PITCH);
        assert_eq!((tiny.height, texts(&tiny)), (2.5, vec!["Bearing…"]));
    }

    #[test]
    fn what_was_cut_says_how_much_room_it_needs() {
        let room = Room { width: 20.0, height: 2.5 };
        let word = fit("Unterlegscheibenhalterung", room, &[2.5], PITCH);
        let s = word.shortage.expect("a word of 25 letters has no room in 20 mm");
        assert_eq!(s.extent, Extent::Width);
        assert!(s.needed > 35.0 && (s.available - 20.0).abs() < 1e-9, "{s:?}");
        assert!(texts(&word)[0].ends_with('…') && width(&word.lines[0]) <= 20.0);

        let rows =
            fit("one two three four five six", Room { width: 12.0, height: 6.25 }, &[2.5], PITCH);
        let s = rows.shortage.expect("there is room for two lines");
        assert_eq!((s.extent, rows.lines.len()), (Extent::Height, 2));
        assert!(s.needed > s.available, "{s:?}");
    }

    #[test]
    fn nothing_sticks_out_however_narrow_the_room() {
        for mm in 1..40 {
            let room = f64::from(mm);
            for text in ["Bracket, mounting, left hand", "ÄÖÜ-12345678901234567890", "W", ""] {
                for line in fit(text, Room { width: room, height: 9.0 }, &HEIGHTS, PITCH).lines {
                    let bare = line.text == "…";
                    assert!(bare || width(&line) <= room + 1e-3, "{room} {:?}", line.text);
                }
            }
        }
    }

    #[test]
    fn words_wider_than_the_column_are_broken_and_nothing_is_lost() {
        let text = "Chg. ABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789 end";
        let lines = broken(text, 2.5, 20.0);
        assert!(lines.len() > 3 && lines.iter().all(|l| width(l) <= 20.0 + 1e-3));
        let all: String = lines.iter().map(|l| l.text.as_str()).collect();
        assert_eq!(all, text.replace(' ', ""));
        assert_eq!(broken("AB", 2.5, 0.1).len(), 2, "a letter to a line and no endless loop");
    }

    #[test]
    fn accents_on_capitals_keep_lines_further_apart() {
        let room = Room { width: 30.0, height: 9.0 };
        let plain = fit("lagging cover Olpe", room, &[2.5], PITCH);
        let accented = fit("lagging cover Ölpe", room, &[2.5], PITCH);
        assert_eq!((plain.lines.len(), plain.pitch), (2, 3.75));
        assert_eq!((accented.lines.len(), accented.pitch), (2, 4.75));
    }

    #[test]
    fn a_blank_text_has_no_lines() {
        assert!(fit("  ", Room { width: 9.0, height: 9.0 }, &HEIGHTS, PITCH).lines.is_empty());
    }
}
