#include "rillclock/graph/downstream_tree.hpp"

#include <algorithm>
#include <boost/graph/compressed_sparse_row_graph.hpp>
#include <boost/graph/depth_first_search.hpp>
#include <utility>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

using UpGraph = boost::compressed_sparse_row_graph<boost::directedS>;

/// From each node to those that lead to it; one node more, the last, to those that lead nowhere.
UpGraph up_graph(std::span<const Node> next) {
    const auto end = static_cast<Node>(next.size());
    std::vector<std::pair<Node, Node>> edges;
    edges.reserve(next.size());
    for (Node node = 0; node < end; ++node) edges.emplace_back(next[node] == nowhere ? end : next[node], node);
    return {boost::edges_are_unsorted_multi_pass, edges.begin(), edges.end(), next.size() + 1};
}

class RecordOrder : public boost::default_dfs_visitor {
public:
    explicit RecordOrder(std::vector<Node>& order) : order_(&order) {}
    void discover_vertex(UpGraph::vertex_descriptor node, const UpGraph& graph) const {
        if (node + 1 < num_vertices(graph)) order_->push_back(static_cast<Node>(node));
    }

private:
    std::vector<Node>* order_;
};

/// Depth first from the ends of the trees; nodes of a circle, and those that lead into one, are not reached.
std::vector<Node> depth_first(std::span<const Node> next) {
    const UpGraph graph = up_graph(next);
    std::vector<Node> order;
    order.reserve(next.size());
    std::vector<boost::default_color_type> colours(num_vertices(graph), boost::white_color);
    const auto colour = boost::make_iterator_property_map(colours.begin(), get(boost::vertex_index, graph));
    boost::depth_first_visit(graph, next.size(), RecordOrder(order), colour);
    return order;
}

}  // namespace

DownstreamTree::DownstreamTree(std::vector<Node> next)
    : next_(std::move(next)), order_(depth_first(next_)), place_(next_.size()), above_(next_.size(), 1) {
    if (order_.size() != next_.size()) throw bug("nodes that should make a tree lead in a circle");
    for (std::size_t i = 0; i < order_.size(); ++i) place_[order_[i]] = i;
    for (auto node = order_.rbegin(); node != order_.rend(); ++node) {
        if (next_[*node] != nowhere) above_[next_[*node]] += above_[*node];
    }
}

std::vector<Node> DownstreamTree::upstream_first() const { return {order_.rbegin(), order_.rend()}; }

std::span<const Node> DownstreamTree::above(Node node) const {
    return std::span(order_).subspan(place_[node], above_[node]);
}

bool DownstreamTree::is_above(Node node, Node below) const {
    return place_[node] >= place_[below] && place_[node] < place_[below] + above_[below];
}

std::vector<Node> DownstreamTree::way(Node from, Node to) const {
    if (!is_above(from, to)) throw bug("a way was asked for between nodes that do not lead to one another");
    std::vector<Node> nodes{from};
    while (nodes.back() != to) nodes.push_back(next_[nodes.back()]);
    return nodes;
}

std::optional<std::vector<Node>> circle_in(std::span<const Node> next) {
    std::vector<bool> leads_out(next.size(), false);
    for (const Node node : depth_first(next)) leads_out[node] = true;
    const auto first = std::find(leads_out.begin(), leads_out.end(), false);
    if (first == leads_out.end()) return std::nullopt;
    auto node = static_cast<Node>(first - leads_out.begin());
    for (std::size_t steps = 0; steps < next.size(); ++steps) node = next[node];  // by then it is in the circle
    std::vector<Node> circle{node};
    while (next[circle.back()] != node) circle.push_back(next[circle.back()]);
    std::rotate(circle.begin(), std::min_element(circle.begin(), circle.end()), circle.end());
    return circle;
}

}  // namespace rillclock
