"""Pages as other programs print them: any wording, face, renderer and way of writing numbers, with their truth."""
