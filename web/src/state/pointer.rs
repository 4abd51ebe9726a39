//! A shared value that is compared by its address: what a component is handed when comparing
//! contents on each render would cost more than rendering.

use std::ops::Deref;
use std::rc::Rc;

/// Equal only to itself and its clones.
#[derive(Debug)]
pub(crate) struct Shared<T>(Rc<T>);

impl<T> Shared<T> {
    /// Shares a value.
    pub(crate) fn new(value: T) -> Self {
        Self(Rc::new(value))
    }
}

impl<T: Default> Default for Shared<T> {
    fn default() -> Self {
        Self::new(T::default())
    }
}

impl<T> Clone for Shared<T> {
    fn clone(&self) -> Self {
        Self(Rc::clone(&self.0))
    }
}

impl<T> PartialEq for Shared<T> {
    fn eq(&self, other: &Self) -> bool {
        Rc::ptr_eq(&self.0, &other.0)
    }
}

impl<T> Deref for Shared<T> {
    type Target = T;

    fn deref(&self) -> &T {
        &self.0
    }
}
