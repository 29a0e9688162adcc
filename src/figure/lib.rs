//! What is drawn: figures as lines, areas and text in millimetres.
