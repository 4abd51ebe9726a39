//! Ids: newtypes over `u32`, so that a row is never taken for a column.

macro_rules! id {
    ($name:ident, $what:literal) => {
        #[doc = concat!("The number of ", $what, ", counted from 0.")]
        #[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
        pub struct $name(pub u32);

        impl $name {
            /// The id as an index into a slice.
            #[must_use]
            pub const fn index(self) -> usize {
                self.0 as usize
            }

            /// The id of the item at `index`; counts over `u32::MAX` saturate (the
            /// builder refuses models of that size).
            #[must_use]
            pub fn from_index(index: usize) -> Self {
                Self(u32::try_from(index).unwrap_or(u32::MAX))
            }
        }
    };
}

id!(ColumnId, "a column");
id!(RowId, "a written row");
id!(VariableId, "a variable of the formulation");
id!(FamilyId, "a constraint family");
id!(SubsetFamilyId, "a family over subsets (one for each tuple of its outer index)");
id!(LabelId, "a label: a member of some index set");
id!(NumberId, "an interned exact number");
