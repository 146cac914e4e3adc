//! The quantities, one type each, so that volts never land where millimetres belong.

macro_rules! quantity {
    ($(#[$doc:meta])* $name:ident, $from:ident, $get:ident, $unit:literal) => {
        $(#[$doc])*
        #[derive(Debug, Clone, Copy, PartialEq, PartialOrd, Default)]
        pub struct $name(f64);

        impl $name {
            /// Nothing of it.
            pub const ZERO: Self = Self(0.0);

            #[doc = concat!("From a figure in ", $unit, ".")]
            pub const fn $from(value: f64) -> Self {
                Self(value)
            }

            #[doc = concat!("The figure in ", $unit, ".")]
            pub const fn $get(self) -> f64 {
                self.0
            }
        }

        impl core::ops::Add for $name {
            type Output = Self;
            fn add(self, other: Self) -> Self {
                Self(self.0 + other.0)
            }
        }

        impl core::ops::AddAssign for $name {
            fn add_assign(&mut self, other: Self) {
                self.0 += other.0;
            }
        }

        impl core::ops::Sub for $name {
            type Output = Self;
            fn sub(self, other: Self) -> Self {
                Self(self.0 - other.0)
            }
        }

        impl core::ops::Mul<f64> for $name {
            type Output = Self;
            fn mul(self, factor: f64) -> Self {
                Self(self.0 * factor)
            }
        }

        impl core::ops::Div for $name {
            type Output = f64;
            fn div(self, other: Self) -> f64 {
                self.0 / other.0
            }
        }

        impl core::iter::Sum for $name {
            fn sum<I: Iterator<Item = Self>>(values: I) -> Self {
                // An empty sum of floats is -0, which would show its sign.
                Self(values.map(|value| value.0).fold(0.0, core::ops::Add::add))
            }
        }
    };
}

quantity!(
    /// A length, kept in millimetres.
    Length, from_mm, mm, "millimetres"
);
quantity!(
    /// A voltage, rms unless the place says otherwise.
    Volts, from_volts, volts, "volts"
);
quantity!(
    /// A current in milliamperes, rms unless the place says otherwise.
    Milliamps, from_ma, ma, "milliamperes"
);

impl Length {
    /// The figure in metres.
    pub const fn m(self) -> f64 {
        self.0 / 1000.0
    }
}
