//! What holds for furniture as a whole.
#[test]
fn dbg_ink() {
    let r = crate::text::Run::new("N", 3.5);
    let f = crate::text::Lettering::bundled();
    let g = f.glyph('N').unwrap();
    use kurbo::Shape;
    eprintln!("{:?} {:?} {:?} {}", r.ink, f.outline(g).bounding_box(), f.ink(g), r.advance);
    eprintln!("{}", f.outline(g).to_svg());
}
