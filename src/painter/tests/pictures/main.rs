//! What the painter draws, pixel by pixel, against pictures worked out by hand.

mod coverage;
mod scene;
mod shapes;
mod textures;
