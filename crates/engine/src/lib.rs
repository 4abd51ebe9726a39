//! Request to reply in slices: all that a worker or the command drives.
