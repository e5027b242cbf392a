import { alertRoutes } from '#shared/contract/alerts';
import { type Mounted, mount } from '../../http/mount.js';
import type { Alerts } from './alerts.js';

export function mountAlerts(alerts: Alerts): Mounted[] {
  return [
    mount(alertRoutes.list, ({ params, query }) =>
      alerts.list(params.studioId, query.view, query.before, query.limit),
    ),
    mount(alertRoutes.get, ({ params }) => alerts.get(params.studioId, params.alertId)),
    mount(alertRoutes.acknowledge, ({ params, body, actor }) =>
      alerts.acknowledge(params.studioId, params.alertId, body.note, actor()),
    ),
    mount(alertRoutes.shelve, ({ params, body, actor }) =>
      alerts.shelve(params.studioId, params.alertId, body.hours, body.reason, actor()),
    ),
    mount(alertRoutes.unshelve, ({ params, actor }) =>
      alerts.unshelve(params.studioId, params.alertId, actor()),
    ),
    mount(alertRoutes.handOver, ({ params, body, actor }) =>
      alerts.handOver(params.studioId, params.alertId, body.personId, body.note, actor()),
    ),
    mount(alertRoutes.rules, ({ params }) => alerts.rules(params.studioId, params.roomId)),
    mount(alertRoutes.setRules, ({ params, body, actor }) =>
      alerts.setRules(params.studioId, params.roomId, body, actor()),
    ),
    mount(alertRoutes.notices, ({ person }) => alerts.notices(person())),
    mount(alertRoutes.readNotices, async ({ person }) => {
      await alerts.readNotices(person());
      return null;
    }),
  ];
}
