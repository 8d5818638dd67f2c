import { urlList, urlNumbers, urlText } from '#src/lib/url-state.ts';

/** The tray's part of the address: holes laid, depths on show, analyte of the grade track. */
export const TRAY_VIEW = { holes: urlList(), depth: urlNumbers(), grade: urlText() };
