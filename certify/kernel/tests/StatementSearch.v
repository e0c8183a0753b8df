(** * Does a search through all orders find what the statement allows?

    Paths and cycles are written here once more, by number: of a path h(0), ..., h(n - 1) the
    steps are from h(i) to h(i + 1), of a cycle modulo n. For every graph whose vertices are
    numbers, the lists that pass these tests are those that the statement allows (two
    theorems), and for small graphs there are as many as is known. *)

From Coq Require Import Bool List Permutation Arith Lia.
From Certify Require Import Statement.
Import ListNotations.

(** ** Steps by number *)

Definition by_number (h : list nat) : list (nat * nat) :=
  map (fun i => (nth i h 0, nth (i + 1) h 0)) (seq 0 (length h - 1)).

Definition by_number_round (h : list nat) : list (nat * nat) :=
  map (fun i => (nth i h 0, nth ((i + 1) mod length h) h 0)) (seq 0 (length h)).

Lemma path_steps_by_number : forall h, path_steps h = by_number h.
Proof.
  induction h as [|x [|y h] IH]; [reflexivity..|].
  change (path_steps (x :: y :: h)) with ((x, y) :: path_steps (y :: h)). rewrite IH.
  unfold by_number. simpl length. rewrite !Nat.sub_succ, !Nat.sub_0_r.
  simpl. rewrite <- seq_shift, map_map. reflexivity.
Qed.

Lemma cycle_steps_by_number : forall h, cycle_steps h = by_number_round h.
Proof.
  intros [|x h]; [reflexivity|]. unfold cycle_steps. rewrite path_steps_by_number.
  unfold by_number, by_number_round. rewrite app_length, Nat.add_sub.
  apply map_ext_in. intros i Hin. apply in_seq in Hin. f_equal.
  - apply app_nth1. lia.
  - destruct (Nat.eq_dec (i + 1) (length (x :: h))) as [->|Hbefore].
    + now rewrite app_nth2, Nat.sub_diag, Nat.mod_same by (simpl; lia).
    + rewrite Nat.mod_small, app_nth1 by lia. reflexivity.
Qed.

(** ** All orders, one by one *)

Fixpoint places (x : nat) (l : list nat) : list (list nat) :=
  (x :: l) :: match l with
              | [] => []
              | y :: l' => map (cons y) (places x l')
              end.

Fixpoint orders (l : list nat) : list (list nat) :=
  match l with
  | [] => [[]]
  | x :: l' => flat_map (places x) (orders l')
  end.

Lemma in_places : forall x l h,
  In h (places x l) <-> exists before after, l = before ++ after /\ h = before ++ x :: after.
Proof.
  induction l as [|y l IH]; intros h; simpl.
  - split.
    + intros [<- | []]. now exists [], [].
    + intros ([|? ?] & after & Heq & ->); [|discriminate]. left. simpl in *. now subst.
  - rewrite in_map_iff. split.
    + intros [<- | (rest & <- & Hin)]; [now exists [], (y :: l)|].
      apply IH in Hin. destruct Hin as (before & after & -> & ->).
      now exists (y :: before), after.
    + intros ([|z before] & after & Heq & ->).
      * left. simpl in *. now subst.
      * injection Heq as -> ->. right. exists (before ++ x :: after).
        split; [reflexivity|]. apply IH. now exists before, after.
Qed.

Lemma in_orders : forall l h, In h (orders l) <-> Permutation h l.
Proof.
  induction l as [|x l IH]; intros h; simpl.
  - split.
    + intros [<- | []]. constructor.
    + intros Hperm. left. symmetry. apply Permutation_nil. now symmetry.
  - rewrite in_flat_map. split.
    + intros (rest & Hrest & Hin). apply IH in Hrest. apply in_places in Hin.
      destruct Hin as (before & after & -> & ->). rewrite <- Hrest.
      symmetry. apply Permutation_middle.
    + intros Hperm. assert (Hin : In x h) by (rewrite Hperm; now left).
      apply in_split in Hin. destruct Hin as (before & after & ->).
      exists (before ++ after). split.
      * apply IH. apply Permutation_cons_inv with x. rewrite <- Hperm.
        apply Permutation_middle.
      * apply in_places. now exists before, after.
Qed.

(** The tests, by number. *)
Section Search.

Variable Q : query nat.

Definition pair_same (e f : nat * nat) : bool := (fst e =? fst f) && (snd e =? snd f).
Definition turned (e : nat * nat) : nat * nat := (snd e, fst e).
Definition either_way (l : list (nat * nat)) (e : nat * nat) : bool :=
  existsb (fun f => pair_same e f || pair_same (turned e) f) l.

Definition steps_test (steps : list (nat * nat)) : bool :=
  forallb (fun e => adjacent Q (fst e) (snd e) && negb (either_way (forbidden Q) e)) steps
  && forallb (either_way steps) (required Q).

Definition ends_test (h : list nat) : bool :=
  let first := nth 0 h 0 in
  let last := nth (length h - 1) h 0 in
  match ends Q with
  | [] => true
  | [s] => (first =? s) || (last =? s)
  | [s; t] => ((first =? s) && (last =? t)) || ((first =? t) && (last =? s))
  | _ => false
  end.

Definition path_test (h : list nat) : bool :=
  (1 <=? length h) && steps_test (by_number h) && ends_test h.

Definition cycle_test (h : list nat) : bool :=
  (3 <=? length h) && steps_test (by_number_round h).

Definition paths : list (list nat) := filter path_test (orders (vertices Q)).
Definition cycles : list (list nat) := filter cycle_test (orders (vertices Q)).

Lemma pair_same_spec : forall e f, pair_same e f = true <-> e = f.
Proof.
  intros [u v] [x y]. unfold pair_same. simpl.
  rewrite andb_true_iff, !Nat.eqb_eq. intuition congruence.
Qed.

Lemma either_way_spec : forall l u v,
  either_way l (u, v) = true <-> In (u, v) l \/ In (v, u) l.
Proof.
  intros l u v. unfold either_way. rewrite existsb_exists.
  setoid_rewrite orb_true_iff. setoid_rewrite pair_same_spec. unfold turned. simpl. split.
  - intros (f & Hin & [<- | <-]); auto.
  - intros [Hin | Hin]; eauto.
Qed.

Lemma steps_test_spec : forall h steps, Permutation h (vertices Q) ->
  steps_test steps = true <-> visits Q h steps.
Proof.
  intros h steps Hperm. unfold steps_test, visits, edge.
  rewrite andb_true_iff, !forallb_forall. setoid_rewrite andb_true_iff.
  setoid_rewrite negb_true_iff. split.
  - intros [Hsteps Hrequired]. split; [exact Hperm|]. split; intros u v Hin.
    + destruct (Hsteps _ Hin) as [Hadjacent Hno]. split; [exact Hadjacent|].
      apply not_true_iff_false in Hno. rewrite either_way_spec in Hno. tauto.
    + apply either_way_spec. now apply Hrequired.
  - intros (_ & Hsteps & Hrequired). split; intros [u v] Hin.
    + destruct (Hsteps _ _ Hin) as (Hadjacent & Hno). split; [exact Hadjacent|].
      apply not_true_iff_false. rewrite either_way_spec. tauto.
    + apply either_way_spec. now apply Hrequired.
Qed.

Lemma first_spec : forall x (h : list nat) s, (nth 0 (x :: h) 0 =? s) = true <-> starts (x :: h) s.
Proof.
  intros x h s. simpl. rewrite Nat.eqb_eq. split.
  - intros ->. now exists h.
  - intros [rest Heq]. congruence.
Qed.

Lemma last_spec : forall x (h : list nat) t,
  (nth (length (x :: h) - 1) (x :: h) 0 =? t) = true <-> stops (x :: h) t.
Proof.
  intros x h t. rewrite Nat.eqb_eq.
  destruct (exists_last (l := x :: h) ltac:(discriminate)) as (rest & y & ->).
  rewrite app_length, Nat.add_sub, app_nth2, Nat.sub_diag by lia. simpl. split.
  - intros ->. now exists rest.
  - intros [other Heq]. now apply app_inj_tail in Heq.
Qed.

Lemma ends_test_spec : forall h, h <> [] -> ends_test h = true <-> has_ends Q h.
Proof.
  intros [|x h] Hsome; [contradiction|]. unfold ends_test, has_ends. cbv zeta.
  destruct (ends Q) as [|s [|t [|? ?]]]; [tauto | | | intuition discriminate];
    rewrite orb_true_iff, ?andb_true_iff, !first_spec, !last_spec; tauto.
Qed.

(** The lists that the statement allows are those that the search finds. *)
Theorem search_finds_the_paths : forall h, ham_path Q h <-> In h paths.
Proof.
  intros h. unfold paths, ham_path, path_test.
  rewrite filter_In, in_orders, !andb_true_iff, Nat.leb_le, path_steps_by_number.
  assert (Hlength : 1 <= length h <-> h <> []).
  { destruct h; simpl; [intuition lia | split; [discriminate | lia]]. }
  split.
  - intros (Hsome & Hvisits & Hends). pose proof Hvisits as (Hperm & _).
    rewrite Hlength, ends_test_spec by assumption.
    now rewrite (steps_test_spec h) by exact Hperm.
  - intros (Hperm & (Hsome & Hsteps) & Hends). apply Hlength in Hsome.
    split; [exact Hsome|]. split; [now apply steps_test_spec | now apply ends_test_spec].
Qed.

Theorem search_finds_the_cycles : forall h, ham_cycle Q h <-> In h cycles.
Proof.
  intros h. unfold cycles, ham_cycle, cycle_test.
  rewrite filter_In, in_orders, !andb_true_iff, Nat.leb_le, cycle_steps_by_number.
  split.
  - intros (Hlength & Hvisits). pose proof Hvisits as (Hperm & _).
    now rewrite (steps_test_spec h) by exact Hperm.
  - intros (Hperm & Hlength & Hsteps). split; [exact Hlength|]. now apply steps_test_spec.
Qed.

End Search.

(** ** Counts that are known

    A path is counted twice here, once from either end; a cycle of n vertices 2n times. *)

Definition graph (n : nat) (adjacent : nat -> nat -> bool) : query nat :=
  {| vertices := seq 0 n; adjacent := adjacent; ends := []; required := []; forbidden := [] |}.

Definition asked (Q : query nat) (e : list nat) (r f : list (nat * nat)) : query nat :=
  {| vertices := vertices Q; adjacent := adjacent Q; ends := e; required := r; forbidden := f |}.

Definition complete (n : nat) : query nat := graph n (fun u v => negb (u =? v)).
Definition line (n : nat) : query nat := graph n (fun u v => (u =? v + 1) || (v =? u + 1)).
Definition ring (n : nat) : query nat :=
  graph n (fun u v => (u =? (v + 1) mod n) || (v =? (u + 1) mod n)).
Definition empty (n : nat) : query nat := graph n (fun _ _ => false).
Definition bipartite (m n : nat) : query nat :=
  graph (m + n) (fun u v => negb (Bool.eqb (u <? m) (v <? m))).
(** Vertices of the cube: three bits, of which one changes. *)
Definition cube : query nat :=
  graph 8 (fun u v => existsb (Nat.eqb (Nat.lxor u v)) [1; 2; 4]).

Definition count (l : list (list nat)) : nat := length l.
Definition counts (Q : query nat) : nat * nat := (count (paths Q), count (cycles Q)).
Ltac computed := vm_compute; reflexivity.

(** No vertex: nothing. One: a path. Two: a path, and no cycle, for there is one edge. *)
Example no_vertex : (paths (complete 0), cycles (complete 0)) = ([], []). Proof. computed. Qed.
Example one_vertex : (paths (complete 1), cycles (complete 1)) = ([[0]], []). Proof. computed. Qed.
Example two_vertices : (paths (complete 2), cycles (complete 2)) = ([[0; 1]; [1; 0]], []).
Proof. computed. Qed.
(** Nor do loops help. *)
Example loops : let all n := graph n (fun _ _ => true) in
  map (fun n => (paths (all n), cycles (all n))) [0; 1; 2; 3] =
  map (fun n => (paths (complete n), cycles (complete n))) [0; 1; 2; 3].
Proof. computed. Qed.

(** The complete graph has n!/2 paths and (n - 1)!/2 cycles (A001710). *)
Example complete_paths :
  map (fun n => count (paths (complete n))) [3; 4; 5; 6] = [6; 24; 120; 720].
Proof. computed. Qed.
Example complete_cycles :
  map (fun n => count (cycles (complete n))) [3; 4; 5; 6] = [6 * 1; 8 * 3; 10 * 12; 12 * 60].
Proof. computed. Qed.

Example a_line : map (fun n => counts (line n)) [2; 3; 4; 5; 6] =
  [(2, 0); (2, 0); (2, 0); (2, 0); (2, 0)].
Proof. computed. Qed.
Example a_ring : map (fun n => counts (ring n)) [3; 4; 5; 6] =
  [(6, 6); (8, 8); (10, 10); (12, 12)].
Proof. computed. Qed.
Example no_edges : map (fun n => count (paths (empty n) ++ cycles (empty n))) [2; 3; 4] = [0; 0; 0].
Proof. computed. Qed.

(** K(m, n) has a path for |m - n| <= 1 and a cycle for m = n; K(3, 3) has six (A010790). *)
Example two_sides :
  map (fun s => counts (bipartite (fst s) (snd s))) [(2, 2); (2, 3); (2, 4); (3, 3)]
  = [(8, 8); (12, 0); (0, 0); (72, 12 * 6)].
Proof. computed. Qed.

(** The cube has 144 paths, each from both ends (A091299), and six cycles (A066037). *)
Example cube_paths : count (paths cube) = 144. Proof. computed. Qed.
Example cube_cycles : count (cycles cube) = 16 * 6. Proof. computed. Qed.

(** ** Demands, of the complete graph on four vertices and the ring of five *)

Example one_end : paths (asked (line 4) [3] [] []) = [[0; 1; 2; 3]; [3; 2; 1; 0]].
Proof. computed. Qed.
Example no_such_end : paths (asked (line 4) [1] [] []) = []. Proof. computed. Qed.
Example two_ends : paths (asked (complete 4) [0; 3] [] []) =
  [[0; 1; 2; 3]; [0; 2; 1; 3]; [3; 1; 2; 0]; [3; 2; 1; 0]].
Proof. computed. Qed.
Example ends_turned :
  paths (asked (complete 4) [3; 0] [] []) = paths (asked (complete 4) [0; 3] [] []).
Proof. computed. Qed.
(** One vertex is both ends of a path of one vertex only. *)
Example same_end_twice :
  map (fun n => paths (asked (complete n) [0; 0] [] [])) [1; 2; 3] = [[[0]]; []; []].
Proof. computed. Qed.
Example end_elsewhere :
  map (fun e => paths (asked (complete 3) e [] [])) [[9]; [0; 9]] = [[]; []].
Proof. computed. Qed.
(** A claim names one end, or two; of three there is no path. *)
Example three_ends : paths (asked (complete 3) [0; 1; 2] [] []) = []. Proof. computed. Qed.

(** Of the 12 paths of K(4), an edge is on 6; of its 3 cycles, on 2. Which way an edge is written,
    and how often, does not matter. *)
Example required_edge :
  map (fun r => counts (asked (complete 4) [] r [])) [[(0, 1)]; [(1, 0)]; [(0, 1); (1, 0); (0, 1)]]
  = [(2 * 6, 8 * 2); (2 * 6, 8 * 2); (2 * 6, 8 * 2)].
Proof. computed. Qed.
Example forbidden_edge :
  map (fun f => counts (asked (complete 4) [] [] f))
    [[(0, 1)]; [(1, 0)]; [(0, 1); (1, 0); (9, 9); (2, 2)]] = [(2 * 6, 8); (2 * 6, 8); (2 * 6, 8)].
Proof. computed. Qed.
(** Required and forbidden, no edge of the graph, a loop, a vertex that is none: nothing. *)
Example nonsense :
  map (fun q => count (paths q ++ cycles q))
    [asked (complete 4) [] [(0, 1)] [(1, 0)]; asked (line 4) [] [(0, 2)] [];
     asked (graph 3 (fun _ _ => true)) [] [(1, 1)] []; asked (complete 4) [] [(0, 9)] [];
     asked (graph 1 (fun _ _ => true)) [] [(0, 0)] []] = [0; 0; 0; 0; 0].
Proof. computed. Qed.

(** ** A rule that is true one way only is a way in one direction *)

Example one_way : let Q := graph 3 (fun u v => v =? (u + 1) mod 3) in
  (paths Q, cycles Q) =
  ([[0; 1; 2]; [1; 2; 0]; [2; 0; 1]], [[0; 1; 2]; [1; 2; 0]; [2; 0; 1]]).
Proof. computed. Qed.
