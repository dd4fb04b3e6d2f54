package web

import (
	"strconv"
	"time"

	"github.com/prometheus/client_golang/prometheus"
)

// metrics counts requests by route, never by address: addresses carry codes and have no end.
type metrics struct {
	requests *prometheus.CounterVec
	seconds  *prometheus.HistogramVec
}

// newMetrics registers what is counted; nil counts nothing.
func newMetrics(r prometheus.Registerer) *metrics {
	if r == nil {
		return nil
	}
	m := &metrics{
		requests: prometheus.NewCounterVec(prometheus.CounterOpts{Name: "ratehouse_requests_total",
			Help: "Requests answered."}, []string{"method", "route", "status"}),
		seconds: prometheus.NewHistogramVec(prometheus.HistogramOpts{Name: "ratehouse_request_seconds",
			Help: "Time from a request's head to the end of its answer.", Buckets: prometheus.ExponentialBuckets(0.001, 2, 14)}, []string{"method", "route"}),
	}
	r.MustRegister(m.requests, m.seconds)
	return m
}

// note counts one request. A method that is none of HTTP's counts as "other", or anybody could make
// new series without end.
func (m *metrics) note(method, route string, status int, took time.Duration) {
	if m == nil {
		return
	}
	switch method {
	case "GET", "HEAD", "POST", "PUT", "PATCH", "DELETE", "OPTIONS":
	default:
		method = "other"
	}
	m.requests.WithLabelValues(method, route, strconv.Itoa(status)).Inc()
	m.seconds.WithLabelValues(method, route).Observe(took.Seconds())
}
