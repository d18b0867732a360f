/// <reference types="pdfkit" />

/** What pdfkit can and its published types do not know yet. */
declare namespace PDFKit.Mixins {
  interface StructureElementOptions {
    /** Which cells a heading of a table is for. */
    scope?: 'Column' | 'Row';
    /** left, top, right, bottom; a figure's extent on its page. */
    bbox?: [number, number, number, number];
    placement?: string;
  }

  interface AnnotationOption {
    /** The element of the structure that the link belongs to. */
    structParent?: PDFStructureElement;
  }
}
