//! How it shows: egui's meshes to pixels on the CPU.
