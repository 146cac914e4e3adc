//! Colours of DXF: by index, true, of the layer, of the block.

/// How an element or a layer says its colour.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Ink {
    /// Red, green, blue in the lowest three bytes.
    Rgb(u32),
    /// The colour of its layer.
    Layer,
    /// The colour of the INSERT that places the block it is in.
    Block,
}

/// White, which is also what stands on paper as black.
pub(super) const WHITE: u32 = 0xff_ff_ff;

impl Ink {
    /// From the index (group 62) and the true colour (group 420), which goes before the index.
    pub(super) fn new(index: Option<i64>, rgb: Option<i64>) -> Self {
        if let Some(Ok(rgb)) = rgb.map(u32::try_from) {
            return Self::Rgb(rgb & WHITE);
        }
        match index {
            Some(0) => Self::Block,
            // A layer that is switched off has its index negative.
            Some(index) => match u8::try_from(index.unsigned_abs()) {
                Ok(index) => Self::Rgb(of_index(index)),
                Err(_) => Self::Layer,
            },
            None => Self::Layer,
        }
    }
}

/// `#rrggbb`.
pub(super) fn written(rgb: u32) -> String {
    format!("#{rgb:06x}")
}

/// The colour of an index from 1.
///
/// 10 to 249 are 24 hues of ten shades: five of them bright to dark, each full and pale. The
/// published tables differ from this rule, and from each other, only in the darkest pale shades and
/// in the greys from 250.
fn of_index(index: u8) -> u32 {
    const FIRST: [u32; 10] = [
        0x00_00_00, 0xff_00_00, 0xff_ff_00, 0x00_ff_00, 0x00_ff_ff, 0x00_00_ff, 0xff_00_ff, WHITE,
        0x80_80_80, 0xc0_c0_c0,
    ];
    const GREYS: [u32; 6] = [
        0x33_33_33, 0x50_50_50, 0x69_69_69, 0x82_82_82, 0xbe_be_be, WHITE,
    ];
    /// In percent.
    const SHADES: [u32; 5] = [100, 65, 50, 30, 15];
    let index = u32::from(index);
    let at = index as usize;
    if let Some(&colour) = FIRST.get(at) {
        return colour;
    }
    if let Some(&colour) = at.checked_sub(250).and_then(|at| GREYS.get(at)) {
        return colour;
    }
    let bright = SHADES[at % 10 / 2];
    let hue = index / 10 - 1;
    // Four steps to a sixth of the circle, in which one of the three colours fades in or out.
    let (sixth, step) = (hue / 4, hue % 4);
    let level = |quarters: u32| match index % 2 {
        0 => 255 * bright * quarters / 400,
        _ => 255 * bright * (4 + quarters) / 800,
    };
    let (none, up, down, all) = (level(0), level(step), level(4 - step), level(4));
    let [red, green, blue] = match sixth {
        0 => [all, up, none],
        1 => [down, all, none],
        2 => [none, all, up],
        3 => [none, down, all],
        4 => [up, none, all],
        _ => [all, none, down],
    };
    red << 16 | green << 8 | blue
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Source: `tests/reference/dxf/PROVENANCE.md`.
    const TABLE: &str = include_str!("../../../tests/reference/dxf/index_colours.csv");

    #[test]
    fn colours_by_index_are_those_of_the_table() {
        let mut compared = 0;
        for line in TABLE.lines().skip_while(|line| !line.starts_with("1,")) {
            let (index, wanted) = line.split_once(',').expect("index and colour");
            let index: u8 = index.parse().expect("an index");
            // The shades in which the published tables differ from each other.
            if index >= 250 || index >= 10 && matches!(index % 10, 7 | 9) {
                continue;
            }
            assert_eq!(written(of_index(index)), wanted, "index {index}");
            compared += 1;
        }
        assert_eq!(compared, 9 + 24 * 8);
    }

    #[test]
    fn a_true_colour_goes_before_the_index() {
        assert_eq!(Ink::new(Some(1), Some(0x12_34_56)), Ink::Rgb(0x12_34_56));
        assert_eq!(Ink::new(Some(1), Some(-1)), Ink::Rgb(0xff_00_00));
        assert_eq!(Ink::new(Some(-5), None), Ink::Rgb(0x00_00_ff));
        assert_eq!(Ink::new(Some(0), None), Ink::Block);
        assert_eq!(Ink::new(Some(256), None), Ink::Layer);
        assert_eq!(Ink::new(Some(257), None), Ink::Layer);
        assert_eq!(Ink::new(None, None), Ink::Layer);
    }
}
