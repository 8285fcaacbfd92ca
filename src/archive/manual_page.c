#include "archive/manual_page.h"

enum file_status manual_page_write(struct page_frame *frame)
{
    const struct archive *archive = frame->archive;
    struct document *document =
        report_compose_manual(archive->shop, archive->templates, frame->arena, frame->diagnostics);
    if (!document)
        return FILE_OK;
    struct buffer page = {0};
    html_write(document, archive->style, archive->page_template, &page);
    enum file_status status = page_write_file(frame, "manual.html", &page);
    buffer_release(&page);
    document_release(document);
    return status;
}
