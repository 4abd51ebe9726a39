//! The kernel against certificates, enumeration, another solver and itself.
//!
//! | module | what is held against what |
//! |---|---|
//! | `certificates` | optima, rays and infeasibility that are known by construction |
//! | `enumeration` | every vertex of tiny problems |
//! | `oracle` | microlp, on seeded random families |
//! | `warm` | warm solves against cold ones, over chains of changes; bits from a rebuilt solver |
//! | `slicing` | every slice size against one slice |
//! | `limits` | bounds of stopped solves against the optimum |
//! | `published` | bounds of known formulations on generated instances |
//! | `metamorphic` | the same problem in other words |
//! | `numerics` | coefficients of very different size |
//! | `search` | tableau rows, bases set aside, bounds on the way, condition |
//! | `presolved` | presolve and the way back against the problem as given |
//! | `work` | iterations and nonzeros touched against a held list |
//! | `edges` | empty, fixed, crossed, free, refused |
//!
//! Each outcome is checked by [`shadow::Shadow`], which keeps its own copy of the problem.

#![cfg(test)]

mod certificates;
mod edges;
mod enumeration;
mod families;
mod instances;
mod limits;
mod metamorphic;
mod numerics;
mod oracle;
mod presolved;
mod published;
mod random;
mod search;
mod shadow;
mod slicing;
mod warm;
mod work;
