//! The ISO style against the tables that it follows.

use super::builtin;
use crate::standards::{lettering, lines, scales, sheets, title_block};
use crate::units::Scale;

#[test]
fn sheet_sizes_are_the_trimmed_ones() {
    let style = builtin("iso").expect("compiled in");
    assert_eq!(style.format.len(), sheets::SHEETS.len());
    for sheet in &sheets::SHEETS {
        let format = style.format.iter().find(|f| f.name == sheet.name).expect("the style has it");
        let lying = (sheet.long, sheet.short);
        let expected = if sheet.upright { (sheet.short, sheet.long) } else { lying };
        assert_eq!((format.width, format.height), expected, "{}", sheet.name);
    }
}

#[test]
fn line_widths_go_together_as_in_a_group() {
    let style = builtin("iso").expect("compiled in");
    for g in &style.group {
        let standard = lines::group(g.wide).expect("the wide line names a group");
        assert_eq!((g.narrow, g.lettering), (standard.narrow, standard.lettering));
    }
}

#[test]
fn every_width_of_the_sheet_is_of_the_series() {
    let style = builtin("iso").expect("compiled in");
    let (frame, block, table) = (&style.frame, &style.title_block, &style.revision_table);
    let widths = [
        frame.line,
        frame.border_line,
        frame.centring_line,
        block.line,
        block.inner_line,
        block.sign.line,
        block.sign.axis,
        table.line,
        table.inner_line,
    ];
    for width in widths {
        assert!(lines::WIDTHS.iter().any(|w| (w - width).abs() < 1e-9), "{width}");
    }
}

#[test]
fn every_height_is_nominal() {
    let style = builtin("iso").expect("compiled in");
    let block = &style.title_block;
    let mut heights = vec![block.name_text, block.own_text, style.revision_table.text];
    heights.extend(block.cell.iter().map(|c| c.text));
    heights.extend(&block.heights);
    heights.push(style.frame.zone.text);
    for g in &style.group {
        heights.extend([g.text, g.label, g.deviation]);
        heights.extend([style.notes.text_h * g.text, style.notes.heading_h * g.text]);
    }
    for h in heights {
        assert!(lettering::is_nominal(h), "{h}");
    }
}

#[test]
fn scales_are_chosen_among_preferred_ones_from_the_largest() {
    let style = builtin("iso").expect("compiled in");
    let all: Vec<Scale> = style.scales.iter().map(|s| s.parse().expect("a scale")).collect();
    assert!(all.iter().all(|s| scales::is_preferred(*s)));
    assert!(all.windows(2).all(|w| w[0].factor() > w[1].factor()));
}

#[test]
fn the_title_block_is_as_wide_as_it_must_be() {
    let style = builtin("iso").expect("compiled in");
    assert!((style.title_block.width - title_block::WIDTH).abs() < 1e-9);
}
