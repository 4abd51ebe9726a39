//! All that is asked of the engine from outside, in one program: so it is linked once, and its tests run side by side.

mod acts;
mod assumptions;
mod centre;
mod control;
mod diagnoses;
mod dispatch;
mod drawings;
mod explained;
mod families;
mod hostile;
mod linearised;
mod papers;
mod plan;
mod reading;
mod recognition;
mod reports;
mod round_trips;
mod slices;
mod steering;
mod worker;
