import { rolesWith } from '@/lib/auth/permissions'
import { defineOperation } from '@/lib/http/operation'
import { siteSettingsBody, siteSettingsSchema } from '@/lib/site/schema'

export const operations = {
  getSiteSettings: defineOperation({
    id: 'getSiteSettings',
    method: 'GET',
    path: '/api/site-settings',
    summary: 'The site’s settings in force: name, time zone and the rules that scores are made with',
    tag: 'Site',
    access: rolesWith('site:read'),
    response: siteSettingsSchema,
  }),
  updateSiteSettings: defineOperation({
    id: 'updateSiteSettings',
    method: 'PUT',
    path: '/api/site-settings',
    summary: 'Put a new version of the settings in force',
    tag: 'Site',
    access: rolesWith('site:write'),
    body: siteSettingsBody,
    response: siteSettingsSchema,
  }),
}
