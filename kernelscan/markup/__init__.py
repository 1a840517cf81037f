"""What goes on paper: a neutral scene, composed once, and one writer for each format."""
