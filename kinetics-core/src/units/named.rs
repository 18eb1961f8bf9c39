//! Lists of units: one line a unit, and everything a menu or a file needs of it.

/// Defines a unit enum from lines `Variant = "code", "symbol", factor;` where
/// the factor turns a number in that unit into the internal one.
macro_rules! unit_list {
    (
        $(#[$about:meta])*
        $name:ident measures $subject:literal by $factor_name:ident: $(#[$about_factor:meta])*
        { $( $(#[$about_unit:meta])* $unit:ident = $code:literal, $symbol:literal, $factor:expr; )+ }
    ) => {
        $(#[$about])*
        #[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, serde::Serialize, serde::Deserialize)]
        #[serde(into = "String", try_from = "String")]
        pub enum $name { $( $(#[$about_unit])* $unit, )+ }

        impl $name {
            /// What these units measure, in words.
            pub const SUBJECT: &str = $subject;

            /// Every unit, in the order of a menu.
            pub const ALL: &[$name] = &[ $( $name::$unit, )+ ];

            /// The spelling for files and keyboards.
            #[must_use]
            pub const fn code(self) -> &'static str {
                match self { $( $name::$unit => $code, )+ }
            }

            /// The spelling for the eye.
            #[must_use]
            pub const fn symbol(self) -> &'static str {
                match self { $( $name::$unit => $symbol, )+ }
            }

            $(#[$about_factor])*
            #[must_use]
            pub const fn $factor_name(self) -> f64 {
                match self { $( $name::$unit => $factor, )+ }
            }

            /// Reads any usual spelling.
            ///
            /// # Errors
            /// [`UnitError::Unknown`](crate::units::UnitError::Unknown), listing
            /// what is accepted.
            pub fn parse(text: &str) -> Result<$name, crate::units::UnitError> {
                crate::units::expression::find(text, $name::ALL, |unit| unit.code()).ok_or_else(|| {
                    crate::units::UnitError::unknown(
                        $subject, text, $name::ALL.iter().map(|unit| unit.symbol()),
                    )
                })
            }
        }

        impl std::fmt::Display for $name {
            fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
                f.write_str(self.symbol())
            }
        }

        impl From<$name> for String {
            fn from(unit: $name) -> String {
                unit.code().to_string()
            }
        }

        impl TryFrom<String> for $name {
            type Error = crate::units::UnitError;
            fn try_from(text: String) -> Result<$name, Self::Error> {
                $name::parse(&text)
            }
        }
    };
}
pub(super) use unit_list;
