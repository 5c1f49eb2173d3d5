//! What a value has in common with its untyped self: the same card, under a type that says in which
//! kind of axes it is.

/// A struct `$typed<F>` around an untyped `$inner` that knows its axes (`inputs.axes`): copied, compared
/// and explained as that, and refused when it is read in axes of another kind.
macro_rules! in_frame {
    ($(#[$doc:meta])* $typed:ident, $inner:ident, $inputs:ty, $outcome:ty, $reading:literal) => {
        $(#[$doc])*
        pub struct $typed<F: $crate::frames::Frame = $crate::frames::Geographic> {
            inner: $inner,
            frame: std::marker::PhantomData<fn() -> F>,
        }

        impl<F: $crate::frames::Frame> $typed<F> {
            fn around(inner: $inner) -> Self {
                $typed { inner, frame: std::marker::PhantomData }
            }

            /// The axes it is in.
            pub fn axes(&self) -> $crate::frames::Axes {
                self.inner.inputs.axes
            }
        }

        impl<F: $crate::frames::Frame> Clone for $typed<F> {
            fn clone(&self) -> Self {
                *self
            }
        }
        impl<F: $crate::frames::Frame> Copy for $typed<F> {}
        impl<F: $crate::frames::Frame> PartialEq for $typed<F> {
            fn eq(&self, other: &Self) -> bool {
                self.inner == other.inner
            }
        }
        impl<F: $crate::frames::Frame> std::fmt::Debug for $typed<F> {
            fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
                write!(f, "{} {:?} in {}", stringify!($typed), self.components(), self.axes().words())
            }
        }

        impl<F: $crate::frames::Frame> $crate::card::Explain for $typed<F> {
            const KIND: &'static str = <$inner as $crate::card::Explain>::KIND;
            const VERSION: u32 = <$inner as $crate::card::Explain>::VERSION;
            type Inputs = $inputs;
            type Outcome = $outcome;

            fn compute(inputs: $inputs) -> $crate::error::Result<Self> {
                if inputs.axes.kind() != F::NAME {
                    return Err($crate::error::Error::FrameMismatch {
                        doing: $reading.to_owned(),
                        left: F::NAME.to_owned(),
                        right: inputs.axes.words(),
                    });
                }
                Ok($typed::around(<$inner>::compute(inputs)?))
            }
            fn inputs(&self) -> $inputs {
                self.inner.inputs()
            }
            fn outcome(&self) -> $outcome {
                self.inner.outcome()
            }
            fn check(inputs: &$inputs, outcome: &$outcome) -> Vec<$crate::card::Check> {
                <$inner>::check(inputs, outcome)
            }
            fn explain(&self) -> $crate::card::Explanation {
                self.inner.explain()
            }
            fn upstream(&self) -> Vec<$crate::card::Card> {
                self.inner.upstream()
            }
        }
    };
}
pub(crate) use in_frame;
