import type { PDFDocument, PDFPage, PDFRef , PDFDict} from 'pdf-lib'
import { PDFArray, PDFHexString, PDFName, PDFNumber, PDFString } from 'pdf-lib'

/** Standard structure types (ISO 32000-2, 14.8.4) that the records use. */
export type StructureType = 'Document' | 'Sect' | 'H1' | 'H2' | 'H3' | 'P' | 'L' | 'LI' | 'LBody' | 'Table' | 'TR' | 'TH' | 'TD' | 'Figure' | 'Caption'

interface Node { ref: PDFRef, dict: PDFDict, kids: PDFArray }

/** The logical structure of a tagged PDF: what is a heading, a table, a figure, in reading order; everything else is an artifact. */
export class Structure {
  private readonly root: PDFRef
  private readonly stack: Node[] = []
  private readonly parents: PDFRef[][] = []
  private readonly pages = new Map<PDFPage, number>()
  private count = 0

  constructor(private readonly doc: PDFDocument) {
    this.root = doc.context.nextRef()
    this.open('Document')
  }

  /** Runs `inside` within a new element of this type. */
  within(type: StructureType, inside: () => void, options: { scope?: 'Row' | 'Column', span?: number } = {}): void {
    this.open(type, options)
    inside()
    this.stack.pop()
  }

  private open(type: StructureType, { scope, span }: { scope?: 'Row' | 'Column', span?: number } = {}): Node {
    const { context } = this.doc
    const [parent, kids] = [this.stack[this.stack.length - 1], PDFArray.withContext(context)]
    const dict = context.obj({ Type: 'StructElem', S: type, P: parent?.ref ?? this.root, K: kids })
    if (scope || span) dict.set(PDFName.of('A'), context.obj({ O: 'Table', ...(scope && { Scope: scope }), ...(span && { ColSpan: span }) }))
    const node = { ref: context.register(dict), dict, kids }
    parent?.kids.push(node.ref)
    this.stack.push(node)
    return node
  }

  /** Content of the element that is open, painted by `paint`. */
  content(page: PDFPage, write: (operators: string) => void, paint: () => void): void {
    const at = this.pages.get(page) ?? this.pages.size
    this.pages.set(page, at)
    const owners = this.parents[at] ??= []
    const node = this.stack[this.stack.length - 1]!
    node.kids.push(this.doc.context.obj({ Type: 'MCR', Pg: page.ref, MCID: owners.length }))
    write(`/${node.dict.get(PDFName.of('S'))!.toString().slice(1)} <</MCID ${owners.length}>> BDC`)
    owners.push(node.ref)
    this.count++
    paint()
    write('EMC')
  }

  /** A figure with the words for those who cannot see it, and its box on the page in PDF coordinates. */
  figure(page: PDFPage, write: (operators: string) => void, alt: string, box: [number, number, number, number], paint: () => void): void {
    const { context } = this.doc
    const { dict } = this.open('Figure')
    dict.set(PDFName.of('Alt'), PDFHexString.fromText(alt))
    dict.set(PDFName.of('A'), context.obj({ O: 'Layout', Placement: 'Block', BBox: box.map(n => PDFNumber.of(Math.round(n * 100) / 100)) }))
    this.content(page, write, paint)
    this.stack.pop()
  }

  /** What only repeats or adorns: rules, running heads, feet. */
  artifact(write: (operators: string) => void, paint: () => void, kind?: 'Pagination'): void {
    write(kind ? `/Artifact <</Type /${kind}>> BDC` : '/Artifact BMC')
    paint()
    write('EMC')
  }

  /** Writes the tree into the catalog; after the last page. */
  finish(language: string): void {
    const { context, catalog } = this.doc
    const nums = PDFArray.withContext(context)
    for (const [page, at] of this.pages) {
      page.node.set(PDFName.of('StructParents'), PDFNumber.of(at))
      page.node.set(PDFName.of('Tabs'), PDFName.of('S'))
      nums.push(PDFNumber.of(at))
      nums.push(context.register(context.obj(this.parents[at]!)))
    }
    context.assign(this.root, context.obj({ Type: 'StructTreeRoot', K: this.stack[0]!.ref, ParentTree: context.register(context.obj({ Nums: nums })), ParentTreeNextKey: this.pages.size }))
    catalog.set(PDFName.of('StructTreeRoot'), this.root)
    catalog.set(PDFName.of('MarkInfo'), context.obj({ Marked: true }))
    catalog.set(PDFName.of('Lang'), PDFString.of(language))
    const preferences = catalog.getOrCreateViewerPreferences()
    preferences.setDisplayDocTitle(true)
  }
}
