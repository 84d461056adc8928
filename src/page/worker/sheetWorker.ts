// The worker that takes a PDF apart so that the page can draw it.
import "pdfjs-dist/build/pdf.worker.mjs";
