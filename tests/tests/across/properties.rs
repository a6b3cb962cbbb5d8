//! What must hold for any scene, tried on random ones (fixed seeds, so that every run tries the same).

mod checks;
mod strategy;
